"""What the drawing says and what is written into it; knows DXF and no mechanics."""
