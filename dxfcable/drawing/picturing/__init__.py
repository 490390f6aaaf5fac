"""How any drawing is pictured, and what was understood laid over it."""
