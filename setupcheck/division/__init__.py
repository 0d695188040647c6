"""Division: planning how the circle is divided, and the readings of a division test. Angles rad; pure functions of numbers."""
