"""Checks: dry fit, weights and balance, stability, flight, strength, electrical."""
