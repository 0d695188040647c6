"""Mutants: small wrong changes to the core, each of which some test should notice."""
