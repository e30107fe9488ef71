"""``python -m rcrules``."""

import sys

from rcrules.cli import main

if __name__ == "__main__":
    sys.exit(main())
