"""`python -m setupcheck`: the same as the command."""

from setupcheck.cli.main import run_and_leave

if __name__ == "__main__":
    run_and_leave()
