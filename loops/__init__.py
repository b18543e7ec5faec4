"""Instruments wired together: circuits, cables, what a circuit must carry, the whole plant, and the loop sheet."""
