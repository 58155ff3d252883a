"""`python -m skychart` does what the command `skychart` does."""

import sys

from skychart.cli import main

if __name__ == "__main__":
    sys.exit(main())
