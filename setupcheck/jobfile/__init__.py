"""The job file: what the planner writes, as typed records with the place of every entry."""
