"""LibreOffice Calc: three parts that work together.

``office/`` goes into the extension and runs inside LibreOffice, in whatever Python that brings along (3.8 or
newer, standard library only). It takes a call from a cell and sends it over a pipe to ``helper.py``, which runs
in Cellfuncs' own environment and calls the catalogue. ``install/calc/`` builds the extension and installs it.
"""
