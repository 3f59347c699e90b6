"""`python -m evolve`, and the console command `evolve`."""

import sys

from evolve.commands.main import main

if __name__ == "__main__":
    sys.exit(main())
