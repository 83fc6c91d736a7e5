"""What evaluates the formulas: Excel, LibreOffice Calc, or the embedded engine. Thin: no physics, no units."""
