"""`python -m cellfuncs` is the command `cellfuncs`."""

import sys

from cellfuncs.cli import main

sys.exit(main())
