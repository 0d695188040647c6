"""Division: planning how the circle is divided. Angles rad; pure functions of numbers."""
