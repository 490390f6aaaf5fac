"""What a starter drawing holds."""
