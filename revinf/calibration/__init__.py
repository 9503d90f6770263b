"""How far a literature can be trusted, measured on studies that were not counted."""
