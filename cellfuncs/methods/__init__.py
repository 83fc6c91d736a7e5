"""Published correlations, one file a flow family.

A method is one small function with its declared range, scatter, property temperature and source
(``base.Method``). Out of its range it refuses, unless the case allows that.
"""

from cellfuncs.methods.base import METHODS, Method, Range

__all__ = ["METHODS", "Method", "Range"]
