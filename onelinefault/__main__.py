"""``python -m onelinefault`` is the command ``onelinefault``."""

import sys

from onelinefault.cli import main

if __name__ == "__main__":
    sys.exit(main())
