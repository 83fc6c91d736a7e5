"""What runs inside LibreOffice. Syntax of Python 3.8, standard library and uno only."""
