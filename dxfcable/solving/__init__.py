"""From Layout to Solution: cables formed, checked and held, heads and anchors in equilibrium."""
