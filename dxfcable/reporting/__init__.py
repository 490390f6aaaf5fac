"""An outcome as JSON, as tables, as one line."""
