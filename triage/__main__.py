"""`python -m triage` is the command `triage`."""

from triage.cli import main

if __name__ == "__main__":
    main()
