"""What stands on force-diagram sheets and on the checker's page."""
