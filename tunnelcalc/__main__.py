"""`python -m tunnelcalc`.

Python begins its path with the folder that the command is given in, which may be a project of
somebody else: nothing is imported from there, and no plugin found.
"""

import os
import sys

if __name__ == "__main__":
    if not sys.flags.safe_path and sys.path[:1] == [os.getcwd()]:
        del sys.path[0]
    from tunnelcalc.cli.main import main

    sys.exit(main())
