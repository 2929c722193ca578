"""Lets ``python -m readiness`` start the program."""

from readiness.cli import main

if __name__ == "__main__":
    main()
