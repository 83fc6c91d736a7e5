"""Rebuild cellfuncs/data/coolprop_fluids.csv and the bibliography rows it needs.

Run by hand after a change of the CoolProp version: ``python tests/substances/make_coolprop_tables.py``.
Everything written here is read out of the installed CoolProp: limits, model classes, reference keys; the
bibliography rows come from the BibTeX file that it ships. Rows of sources.csv that are there already stay.
"""

import csv
import json
import os
import re
from pathlib import Path

import CoolProp
from CoolProp import CoolProp as engine

DATA = Path(__file__).parents[2] / "cellfuncs" / "data"
LIBRARY = "Bell-IECR-2014"  # the library itself, for what has no paper of its own
COLUMNS = [
    "key",
    "cas",
    "pseudo_pure",
    "molar_mass",
    "t_min",
    "t_max",
    "p_max",
    "t_critical",
    "p_critical",
    "t_triple",
    "viscosity_model",
    "conductivity_model",
    "surface_tension",
    "reference_state",
    "eos_source",
    "viscosity_source",
    "conductivity_source",
    "surface_tension_source",
    "melting_source",
    "source",
]
# Water: the equations are those of the IAPWS releases, which is how engineers cite them.
WATER = {
    "eos_source": "IAPWS-R6-95",
    "viscosity_source": "IAPWS-R12-08",
    "conductivity_source": "IAPWS-R15-11",
    "surface_tension_source": "IAPWS-R1-76",
}


def model_class(model: dict | list) -> str:
    """The class of a transport model in CoolProp's own description of a fluid."""
    if isinstance(model, list):
        model = model[0] if model else {}
    if not model:
        return "none"
    kind = model.get("type", "")
    if kind == "ECS":
        return "ECS vs " + model["reference_fluid"]
    if kind in ("Chung", "rhosr-CS"):
        return kind
    return "dedicated"


def reference_state(state: engine.AbstractState) -> str:
    """Where enthalpy and entropy of this fluid are zero, as far as a usual convention fits."""

    def saturated_liquid(temperature: float) -> tuple[float, float]:
        try:
            state.update(engine.QT_INPUTS, 0.0, temperature)
        except ValueError:
            return float("nan"), float("nan")
        return state.hmass(), state.smass()

    low = max(state.Tmin(), state.Ttriple())
    if low < 273.15 < state.T_critical():
        enthalpy, entropy = saturated_liquid(273.15)
        if abs(enthalpy - 200e3) < 200 and abs(entropy - 1000) < 1:
            return "200 kJ/kg and 1 kJ/(kg K) for saturated liquid at 0 degC"
    if low < 233.15 < state.T_critical():
        enthalpy, entropy = saturated_liquid(233.15)
        if abs(enthalpy) < 200 and abs(entropy) < 1:
            return "zero for saturated liquid at -40 degC"
    try:
        state.update(engine.PQ_INPUTS, 101325.0, 0.0)
        if abs(state.hmass()) < 200 and abs(state.smass()) < 2:
            return "zero for saturated liquid at 101325 Pa"
    except ValueError:
        pass
    enthalpy, entropy = saturated_liquid(low)
    if abs(enthalpy) < 50 and abs(entropy) < 0.2:
        return "zero for saturated liquid at the triple point"
    return "that of the equation's authors"


def fluid_row(key: str) -> dict:
    """One row of the table of pure and pseudo-pure fluids."""
    facts = json.loads(engine.get_fluid_param_string(key, "JSON"))[0]
    state = engine.AbstractState("HEOS", key)
    transport = facts.get("TRANSPORT", {})
    papers = {
        name: engine.get_BibTeXKey(key, entry) or ""
        for name, entry in (
            ("eos_source", "EOS"),
            ("viscosity_source", "VISCOSITY"),
            ("conductivity_source", "CONDUCTIVITY"),
            ("surface_tension_source", "SURFACE_TENSION"),
            ("melting_source", "MELTING_LINE"),
        )
    }
    models = {
        "viscosity_model": model_class(transport.get("viscosity", {})),
        "conductivity_model": model_class(transport.get("conductivity", {})),
    }
    for quantity in ("viscosity", "conductivity"):
        if models[quantity + "_model"] == "none":
            papers[quantity + "_source"] = ""
        elif not papers[quantity + "_source"]:
            papers[quantity + "_source"] = LIBRARY
    tension = "surface_tension" in facts["ANCILLARIES"]
    if tension and not papers["surface_tension_source"]:
        papers["surface_tension_source"] = LIBRARY
    if not tension:
        papers["surface_tension_source"] = ""
    papers["melting_source"] = (papers["melting_source"] or LIBRARY) if state.has_melting_line() else ""
    papers["eos_source"] = papers["eos_source"] or LIBRARY
    # Several papers for one model stand in one field, parted by ";"; an internal report has no public entry.
    papers = {name: key.replace(",", ";").replace("Huber-RP912", LIBRARY) for name, key in papers.items()}
    if key == "Water":
        papers |= WATER
    return {
        "key": key,
        "cas": facts["INFO"]["CAS"],
        "pseudo_pure": "yes" if facts["EOS"][0]["pseudo_pure"] else "no",
        "molar_mass": repr(state.molar_mass()),
        "t_min": repr(round(max(state.Tmin(), state.Ttriple()), 9)),
        "t_max": repr(round(state.Tmax(), 9)),
        "p_max": repr(round(state.pmax(), 6)),
        "t_critical": repr(state.T_critical()),
        "p_critical": repr(state.p_critical()),
        "t_triple": repr(round(state.Ttriple(), 9)),
        "surface_tension": "yes" if tension else "no",
        "reference_state": reference_state(state),
        "source": f"CoolProp {CoolProp.__version__}",
        **models,
        **papers,
    }


def bibliography() -> dict[str, tuple[str, str]]:
    """BibTeX key -> (authors, year, title; DOI) from the file that CoolProp ships."""
    text = (Path(os.path.dirname(CoolProp.__file__)) / "CoolPropBibTeXLibrary.bib").read_text(
        "utf-8", "replace"
    )
    entries = {}
    for chunk in re.split(r"\n@", text):
        head = re.match(r"@?\w+\{([^,]+),", chunk)
        if not head:
            continue
        fields = {
            name.casefold(): re.sub(r"[{}\\$_]", "", re.sub(r"\\['`\"^~=.]|\\[cvHk](?=[{ ])", "", value))
            for name, value in re.findall(r"^\s*(\w+)\s*=\s*\{(.*?)\}\s*,?\s*$", chunk, re.M | re.S)
        }
        clean = {name: re.sub(r"\s+", " ", value).strip() for name, value in fields.items()}
        where = " ".join(
            part
            for part in (
                clean.get("journal")
                or clean.get("booktitle")
                or clean.get("publisher")
                or clean.get("school")
                or clean.get("institution"),
                clean.get("volume"),
            )
            if part
        )
        authors = clean.get("author", "").split(" and ")
        who = authors[0] + (
            " et al." if len(authors) > 2 else "".join(" and " + name for name in authors[1:])
        )
        said = f"{who} ({clean.get('year', 'no year')}): {clean.get('title', '')}"
        entries[head.group(1).strip()] = (said + (f". {where}" if where else ""), clean.get("doi", ""))
    return entries


def write_csv(path: Path, columns: list[str], rows: list[dict]) -> None:
    """Write rows with plain line ends."""
    with open(path, "w", newline="", encoding="utf-8") as file:
        writer = csv.DictWriter(file, columns, lineterminator="\n")
        writer.writeheader()
        writer.writerows(rows)


def main() -> None:
    """Write both tables."""
    fluids = [fluid_row(key) for key in sorted(engine.get_global_param_string("fluids_list").split(","))]
    write_csv(DATA / "coolprop_fluids.csv", list(COLUMNS), fluids)
    fields = [row[name] for row in fluids for name in COLUMNS if name.endswith("_source")]
    wanted = {key for field in fields for key in field.split(";")} - {""}
    with open(DATA / "sources.csv", encoding="utf-8", newline="") as file:
        rows = {row["key"]: row for row in csv.DictReader(file)}
    known = bibliography()
    for key in sorted(wanted - rows.keys()):
        if key not in known:
            print("no entry for", key)
            continue
        text, number = known[key]
        rows[key] = {"key": key, "authors_year_title": text, "doi_or_number": number}
    columns = ["key", "authors_year_title", "doi_or_number"]
    write_csv(DATA / "sources.csv", columns, [rows[key] for key in sorted(rows)])


if __name__ == "__main__":
    main()
