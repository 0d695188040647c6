"""Physics: pure functions of numbers. Lengths mm, angles rad, degC, N, MPa."""
