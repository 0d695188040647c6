"""Reports of one review: text for the terminal, JSON for other programs."""
