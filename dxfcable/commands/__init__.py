"""What each command does, apart from how it is typed."""
