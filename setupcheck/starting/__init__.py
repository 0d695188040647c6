"""A first job file from a few answers: questions with defaults, a commented plan for each kind of part, and its limits taken
from its own review. For `setupcheck new` alone."""
