"""Engineering of flight, free of the rest of the program: numbers in, numbers out.

Lengths are mm, areas mm2, masses g, angles degrees, speeds m/s, forces N, moments N mm; a name
carries its unit. Axes: x aft, y to starboard, z up. Derivatives are per radian where they say so.
"""
