"""Starter workbooks: one a flow kind, to be filled with the engineer's own case.

The values in them are placeholders that give a plausible case, not data of anything.
"""

from collections.abc import Mapping
from pathlib import Path

from cellfuncs.cases import labels
from cellfuncs.sheets.case_sheet import CaseSheet, write_book

_STORY = "Starter: put your own values into the tinted cells; spare rows take any further label of CF_LIST."
_COMMON = (("tolerance", 5, "%", None), ("smallest that matters", 0.1, "K", None))

_STARTERS: Mapping[str, CaseSheet] = {
    "duct": CaseSheet(
        title="Duct: which terms matter",
        story=_STORY,
        block="duct_case",
        rows=(
            ("flow kind", "duct", None, None),
            ("substance", "water", None, None),
            ("velocity", 1.5, "m/s", None),
            ("diameter", 20, "mm", None),
            ("length", 2, "m", None),
            ("inlet temperature", 20, "degC", None),
            ("wall temperature", 50, "degC", None),
            ("pressure", 3, "bar", None),
            ("answer", "outlet temperature", None, None),
            *_COMMON,
        ),
        results=(
            ("property temperature", "degC", "0.0"),
            ("Reynolds number", "", "0"),
            ("Prandtl number", "", "0.00"),
            ("Nusselt number", "", "0.0"),
            ("coefficient", "W/m2K", "0"),
            ("outlet temperature", "degC", "0.0"),
            ("duty", "kW", "0.00"),
            ("pressure drop", "kPa", "0.00"),
        ),
        question="Which terms of the energy equation matter?",
        sweep=("velocity", "m/s", (0.2, 0.5, 1, 2, 5, 10), "viscous heating"),
        spare=6,
        protected=True,
    ),
    "plate": CaseSheet(
        title="Plate: which terms matter",
        story=_STORY,
        block="plate_case",
        rows=(
            ("flow kind", "plate", None, None),
            ("substance", "air", None, None),
            ("velocity", 25, "m/s", None),
            ("length", 0.5, "m", None),
            ("width", 0.5, "m", None),
            ("stream temperature", 20, "degC", None),
            ("wall temperature", 60, "degC", None),
            ("answer", "coefficient", None, None),
            *_COMMON,
        ),
        results=(
            ("property temperature", "degC", "0.0"),
            ("Reynolds number", "", "0"),
            ("Prandtl number", "", "0.000"),
            ("Nusselt number", "", "0.0"),
            ("coefficient", "W/m2K", "0.0"),
            ("duty", "W", "0.0"),
            ("recovery rise", "K", "0.00"),
            ("Mach number", "", "0.000"),
        ),
        question="Which terms of the energy equation matter?",
        sweep=("velocity", "m/s", (5, 10, 25, 50, 100, 200), "viscous heating"),
        spare=6,
        protected=True,
    ),
    "gap": CaseSheet(
        title="Sheared gap: which terms matter",
        story=_STORY,
        block="gap_case",
        rows=(
            ("flow kind", "gap", None, None),
            ("substance", "ISO VG 32 VI 95", None, None),
            ("velocity", 5, "m/s", None),
            ("gap", 25, "µm", None),
            ("length", 100, "mm", None),
            ("width", 50, "mm", None),
            ("wall temperature", 45, "degC", None),
            ("answer", "peak temperature", None, None),
            *_COMMON,
        ),
        results=(
            ("viscosity", "mPa s", "0.00"),
            ("Reynolds number", "", "0.00"),
            ("Brinkman number", "", "0.00"),
            ("driving difference", "K", "0.00"),
            ("peak temperature", "degC", "0.0"),
            ("wall shear stress", "kPa", "0.00"),
            ("friction power", "W", "0.0"),
        ),
        question="Which terms of the energy equation matter?",
        sweep=("velocity", "m/s", (0.5, 1, 2, 5, 10, 20), "advection"),
        spare=6,
        protected=True,
    ),
}


def kinds() -> tuple[str, ...]:
    """The flow kinds there is a starter for."""
    return tuple(_STARTERS)


def write_starter(kind: str, path: str | Path) -> None:
    """Write the starter of a flow kind; raises UnknownName for another word."""
    write_book(_STARTERS[labels.choice("flow_kind", kind)], path)
