"""Printable solids: STEP, STL and 3MF of each, and the whole aircraft as a 3D model."""
