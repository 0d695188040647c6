"""`python -m setupcheck`: the same as the command."""

from setupcheck.cli.main import run

if __name__ == "__main__":
    run()
