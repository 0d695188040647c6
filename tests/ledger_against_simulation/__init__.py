"""The package under test against the exact simulation of tests/rigidbody: random routes, said in a job file and walked.

sayable      a random route with everything taken out that a job file cannot say
as_job       the same route as the text of a job file, and the values of the errors of which it states only bounds
told         figures of the package for these exact values
"""
