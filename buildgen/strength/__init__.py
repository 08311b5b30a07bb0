"""Strength and stiffness of spars: loads, sections, stress. Numbers in, numbers out."""
