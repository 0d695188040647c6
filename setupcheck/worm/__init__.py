"""Worm and wheel: geometry, tilt of the head, cutter. Lengths mm, angles rad; pure functions of numbers."""
