"""What a check of a workbook found, and how it is shown.

============  ==========================================================================
report.py     the report: findings, what agreed, what was not understood, excerpts
terminal.py   tables on the terminal
written.py    the report as JSON
page.py       one self-contained HTML page (``data/check_report.html``)
chart.py      a drawing of a case's terms
annotated.py  a copy of the workbook with notes on cells and a sheet of findings
============  ==========================================================================
"""
