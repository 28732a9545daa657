"""`python -m rulecheck` is the command `rulecheck`."""

import sys

from rulecheck.cli import main

if __name__ == "__main__":
    sys.exit(main())
