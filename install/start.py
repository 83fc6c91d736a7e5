#!/usr/bin/env python3
"""Sets Cellfuncs up in a private environment and runs it: `python3 install/start.py demo`.

This file only refuses an old Python and hands the command on, so its syntax is that of any Python.
"""

import os
import sys

OLDEST = (3, 11)

if __name__ == "__main__":
    if sys.version_info < OLDEST:
        text = "This is Python %d.%d; Cellfuncs needs %d.%d or newer: start this file with one.\n"
        sys.stderr.write(text % (sys.version_info[:2] + OLDEST))
        sys.exit(2)
    sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
    from commands import main

    sys.exit(main(sys.argv[1:]))
