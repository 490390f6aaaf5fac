"""Loads that come beside the load texts: the table handed back, the areas of a plan."""
