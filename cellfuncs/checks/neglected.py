"""Effects that a sheet says it neglects, against what terms say of the case as it is stated."""

from collections.abc import Iterator

from cellfuncs.answers import solve
from cellfuncs.cases import labels
from cellfuncs.cases.block import Stated as Row
from cellfuncs.cases.case import Case
from cellfuncs.checks.finding import Finding
from cellfuncs.checks.stated import SheetCase
from cellfuncs.errors import CellfuncsError
from cellfuncs.terms import table
from cellfuncs.terms.verdicts import KEEP

# what follows from the others; a case block states one of each group
_ONE_OF = (
    ("velocity", "volume_flow", "mass_flow"),
    ("wall_temperature", "heat_flux", "temperature_difference"),
    ("viscosity", "kinematic_viscosity"),
    ("pressure", "gauge_pressure"),
    ("hydraulic_diameter", "diameter"),
)
# answers that a sheet states are no rows of a case here: the terms are judged by what comes out of the case
_ANSWERS = ("coefficient", "friction_factor", "pressure_drop", "outlet_temperature")


def case_of(sheet: SheetCase) -> Case | None:
    """The case that the sheet's numbers and texts state, or None where no flow kind is known."""
    if sheet.flow is None:
        return None
    table_of_labels = labels.dictionary()
    rows = {}
    for key, entries in sheet.stated.items():
        label = table_of_labels[key]
        if label.role != "stated" or key in _ANSWERS or (label.flows and sheet.flow not in label.flows):
            continue
        rows[key] = Row(key, entries[0].label, 0, entries[0].si, None, entries[0].unit)
    for group in _ONE_OF:
        for key in [k for k in group if k in rows][1:]:
            del rows[key]
    _supplied(sheet, rows)
    if "diameter" in rows and "flow_area" in rows:
        del rows["flow_area"]
    for key, text in sheet.facts.items():
        label = table_of_labels.get(key)
        if label is None or not isinstance(text, str) or (label.flows and sheet.flow not in label.flows):
            continue
        if label.role in ("choice", "text") and key != "flow_kind":
            try:
                value = labels.choice(key, text) if label.role == "choice" else text
            except CellfuncsError:
                continue
            rows[key] = Row(key, label.label, 0, value, None, "")
    return Case(sheet.flow, rows)


def _supplied(sheet: SheetCase, rows: dict[str, Row]) -> None:
    """What sheets leave unsaid: radiation goes to the stream's temperature, a film is as long as its area is wide."""
    if "emissivity" in rows and "surroundings_temperature" not in rows and "stream_temperature" in rows:
        stream = rows["stream_temperature"].value
        rows["surroundings_temperature"] = Row("surroundings_temperature", "surroundings", 0, stream, None, "K")
    if sheet.flow == "gap" and "length" not in rows:
        area = next((e.si for key in ("area", "surface_area") for e in sheet.stated.get(key, ())), None)
        if area:
            rows["length"] = Row("length", "length", 0, area**0.5, None, "m")


def findings(sheet: SheetCase) -> Iterator[Finding]:
    """One finding for every neglected term whose verdict is to keep it."""
    terms = [str(term) for term in sheet.facts.get("neglects") or ()]
    case = case_of(sheet) if terms else None
    if case is None:
        return
    judged: dict[str, tuple] = {}
    for equation in table.EQUATIONS:
        try:
            judged |= {row[0]: row for row in reversed(table.term_rows(solve(case), equation))}
        except CellfuncsError:
            continue
    first = sheet.fact_cells.get("neglects", "")
    for term in terms:
        row = judged.get(term)
        cell = sheet.fact_cells.get(f"neglects {term}", first)
        if row is None or row[4] != KEEP:
            continue
        share = f"{row[2]:.3g}" if isinstance(row[2], float) else str(row[2])
        effect = f", effect {row[3]:.3g}" if isinstance(row[3], float) else ""
        yield Finding(
            cell=cell,
            severity="error",
            quantity=term,
            stated=0.0,
            recomputed=row[2] if isinstance(row[2], float) else None,
            unit="",
            code="dropped-term",
            cause=f"{term} is neglected, but its share is {share}{effect}: {row[5]}",
            confidence=0.9,
            message=f"{term} is neglected; its verdict is {row[4]} (share {share}{effect})",
            source="the terms of the case, scaled (CF_TERMS)",
            case=sheet.name,
            reasoning=(row[5],),
        )
