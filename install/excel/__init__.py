"""Cellfuncs in Excel on Windows: installing, repairing, removing. How it works: install/README.md.

`office.py` looks at the machine, `settings.py` writes what Excel's side reads, `build.py` makes the add-in file
(it alone runs inside the private environment and talks to Excel), `command.py` does the steps in order.
"""
