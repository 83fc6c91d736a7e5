"""Whole sheets: the look of ours, and starters for a flow kind."""
