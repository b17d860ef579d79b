"""`python -m tunnelcalc`."""

import sys

from tunnelcalc.cli.main import main

if __name__ == "__main__":
    sys.exit(main())
