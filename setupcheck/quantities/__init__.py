"""Quantities: every number of a job by name and instance, each computed once. The only package that knows job and leaves."""
