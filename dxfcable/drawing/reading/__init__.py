"""How a drafter's entities are understood: the rooms behind `reader`."""
