"""Electric propulsion: propellers, motors, batteries. Numbers in, numbers out."""
