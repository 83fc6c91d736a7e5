"""Colours, number format and caution that all our sheets share."""

INK, GREY, LINE, TINT, RULE = "#1F2A30", "#7A858C", "#D5D9DC", "#F3EEF7", "#6B4C8A"
SHARES = '[=0]"0";0.0E+00'
CAUTION = (
    "Supports a licensed engineer's judgement and does not replace it. Pressure equipment, hot surfaces, "
    "flammable or toxic fluids, freezing and boiling are governed by your local codes."
)
