"""Schedules of cables, hangers and anchorages."""
