"""Published correlations, one file a flow family.

A method is one small function with its declared range, scatter, property temperature and source
(``base.Method``). Out of its range it refuses, unless the case allows that.
"""

# all of them, in one order, so that the list of methods does not depend on who asked first
from cellfuncs.methods import duct, free_plate, free_face, free_body, chimney, enclosure, mixed, radiation  # noqa: F401, I001
from cellfuncs.methods import plate, cylinder, sphere, bank, bed, jet, film, drag, high_speed, condensation, boiling  # noqa: F401
from cellfuncs.methods import duct_entry_sections  # noqa: F401
from cellfuncs.methods import fin, transient, layers, exchanger  # noqa: F401
from cellfuncs.methods.base import METHODS, Method, Range

__all__ = ["METHODS", "Method", "Range"]
