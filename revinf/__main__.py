"""`python -m revinf`: the same as the command `revinf`."""

from revinf.cli.app import run

if __name__ == "__main__":
    run()
