"""`python3 core`: the terminal."""

import sys

from strayline.cli import main

if __name__ == "__main__":
    sys.exit(main())
