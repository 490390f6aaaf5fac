"""Cable-supported structures solved on the drafter's own DXF drawing."""

__version__ = "0.1.0"
