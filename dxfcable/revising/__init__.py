"""A load change: what the record keeps, what counts now, what moved."""
