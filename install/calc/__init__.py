"""The extension for LibreOffice Calc: building it, and putting it into the office or taking it out."""
