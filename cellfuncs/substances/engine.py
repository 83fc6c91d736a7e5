"""The one door to CoolProp: imported at the first property, never before."""

import threading
from functools import cache

BUILD_LOCK = threading.Lock()  # CoolProp's fluid library is not safe while two threads open fluids


@cache
def coolprop():
    """Return the module CoolProp.CoolProp (2.6 to 4.3 s at the first call)."""
    with BUILD_LOCK:
        from CoolProp import CoolProp as module
    return module


def open_state(backend: str, key: str, fraction: float | None = None, basis: str = "mass"):
    """Open an AbstractState of our own; not to be shared between threads."""
    module = coolprop()
    with BUILD_LOCK:
        state = module.AbstractState(backend, key)
        if fraction is not None:
            (state.set_mass_fractions if basis == "mass" else state.set_volu_fractions)([fraction])
    return state
