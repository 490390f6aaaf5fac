"""Proofs of an issued drawing: its geometry against the laws of statics, its record."""
