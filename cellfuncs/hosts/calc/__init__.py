"""LibreOffice Calc: the parts that work together.

``office/`` goes into the extension and runs inside LibreOffice, in whatever Python that brings along (3.8 or
newer, standard library only). It takes a call from a cell and sends it over a pipe to ``helper.py``, which runs
in Cellfuncs' own environment and calls the catalogue. ``cellfuncs.oxt`` is the extension, built by
``install/calc/compile_types.py``; ``installer.py`` puts it into the office (``python -m cellfuncs.hosts.calc``).
"""
