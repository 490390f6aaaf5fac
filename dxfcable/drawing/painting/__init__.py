"""How a solution is drawn: the rooms behind `painter`."""
