"""Many workbooks at once: whole archives, of which some files are broken and some are traps.

============  ==========================================================================
found.py      which workbooks are meant, and what the outputs of each are called
one.py        one file's check, from its bytes to what is told of it and written
worker.py     a process that checks one file after another, bounded, replaced when it fails
crew.py       a worker a processor of this machine
cluster.py    the same on a running Dask cluster
state.py      what is done already, kept so that an interrupted run goes on
summary.py    all outcomes as HTML and CSV, the worst first (``data/check_summary.html``)
told.py       all outcomes on the terminal
command.py    the run of ``cellfuncs check``
============  ==========================================================================

Files are read and outputs are written by the process that was started by the user; whoever checks gets bytes and
answers with bytes. So a process that is ended at any moment leaves nothing behind, and a cluster needs none of the
folders.
"""
