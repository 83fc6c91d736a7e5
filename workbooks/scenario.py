"""The scenario of the samples: the Veldermoor pilot line, invented, with nobody real in it."""

from cellfuncs.sheets.case_sheet import CaseSheet
from cellfuncs.sheets.many_cases import ManyCases

COOLANT = CaseSheet(
    title="Coolant channel of a mould plate",
    story="Veldermoor pilot line, mould plate 3 (invented). Glycol solution in a drilled channel; the plate holds "
    "its wall at one temperature.",
    block="coolant",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "ethylene glycol 30 % by mass", None, None),
        ("velocity", 3, "m/s", 0.1),
        ("diameter", 8, "mm", None),
        ("length", 1.2, "m", None),
        ("inlet temperature", 18, "degC", 0.5),
        ("wall temperature", 45, "degC", 1),
        ("pressure", 3.2, "bar", None),
        ("time scale", 90, "s", None),
        ("answer", "outlet temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("Reynolds number", "", "0"),
        ("Prandtl number", "", "0.0"),
        ("Péclet number", "", "0"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.0"),
        ("duty", "W", "0"),
        ("pressure drop", "kPa", "0.00"),
        ("friction rise", "K", "0.0000"),
    ),
    question="Which terms may the outlet temperature be calculated without?",
    sweep=("velocity", "m/s", (0.25, 0.5, 1, 2, 4, 8), "viscous heating"),
)

FILM = CaseSheet(
    title="Oil film under a sliding shoe",
    story="Veldermoor pilot line, press drive (invented). A shoe slides on a flooded film between two walls held "
    "at one temperature.",
    block="film",
    rows=(
        ("flow kind", "gap", None, None),
        ("substance", "ISO VG 46 VI 98", None, None),
        ("sliding speed", 9, "m/s", 0.2),
        ("film thickness", 18, "µm", 1.5),
        ("film length", 140, "mm", None),
        ("width", 60, "mm", None),
        ("wall temperature", 55, "degC", 2),
        ("answer", "peak temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.5, "K", None),
    ),
    results=(
        ("viscosity", "mPa s", "0.00"),
        ("conductivity", "W/mK", "0.000"),
        ("Reynolds number", "", "0.00"),
        ("Péclet number", "", "0"),
        ("driving difference", "K", "0.0"),
        ("peak temperature", "degC", "0.0"),
        ("wall shear stress", "kPa", "0.0"),
        ("friction power", "W", "0"),
        ("local flux", "kW/m2", "0.0"),
    ),
    question="Does the film need a temperature field, and which terms must it carry?",
    sweep=("sliding speed", "m/s", (1, 2, 4, 8, 12, 16), "advection"),
)

SODIUM = CaseSheet(
    title="Slow liquid metal in a heated duct",
    story="Veldermoor pilot line, purification loop (invented). Sodium trickles through a heated tube: conduction "
    "along the stream rules.",
    block="sodium",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "sodium", None, None),
        ("velocity", 12, "mm/s", 1),
        ("diameter", 25, "mm", None),
        ("length", 250, "mm", None),
        ("inlet temperature", 280, "degC", 2),
        ("wall temperature", 330, "degC", 2),
        ("wall thickness", 1.5, "mm", None),
        ("wall conductivity", 19, "W/mK", None),
        ("answer", "duty", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("Reynolds number", "", "0"),
        ("Prandtl number", "", "0.0000"),
        ("Péclet number", "", "0.00"),
        ("number of transfer units", "", "0.00"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.0"),
        ("duty", "W", "0"),
    ),
    question="May the duty be calculated without conduction along the stream and along the wall?",
    sweep=("velocity", "mm/s", (2, 4, 8, 12, 20, 30), "conduction along"),
)

WARM_PIPE = CaseSheet(
    title="Warm water pipe outdoors",
    story="Veldermoor pilot line, yard pipe (invented). Insulated steel pipe from the boiler house to the far shed "
    "on a winter night.",
    block="yard_pipe",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "water", None, None),
        ("velocity", 0.6, "m/s", 0.05),
        ("diameter", 52, "mm", None),
        ("length", 80, "m", None),
        ("inlet temperature", 65, "degC", 1),
        ("pressure", 4, "bar", None),
        ("wall thickness", 3, "mm", None),
        ("wall conductivity", 45, "W/mK", None),
        ("fouling resistance", 0.0001, "m2-K/W", None),
        ("insulation thickness", 40, "mm", None),
        ("insulation conductivity", 0.038, "W/mK", None),
        ("outside coefficient", 18, "W/m2K", 4),
        ("outside temperature", -5, "degC", 3),
        ("time scale", 6, "h", None),
        ("answer", "outlet temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("Reynolds number", "", "0"),
        ("overall coefficient", "W/m2K", "0.00"),
        ("number of transfer units", "", "0.0000"),
        ("outlet temperature", "degC", "0.00"),
        ("bulk rise", "K", "0.00"),
        ("duty", "W", "0"),
        ("pressure drop", "kPa", "0.00"),
    ),
    question="What must a calculation of the heat loss carry?",
    sweep=("velocity", "m/s", (0.05, 0.1, 0.2, 0.6, 1.2, 2.4), "storage"),
)

SAMPLES = {
    "coolant_channel.xlsx": COOLANT,
    "oil_film.xlsx": FILM,
    "sodium_duct.xlsx": SODIUM,
    "warm_pipe.xlsx": WARM_PIPE,
}

TWENTY_FILE = "twenty_cases.xlsx"
_ZONES = tuple(range(1, 21))
TWENTY = ManyCases(
    title="Twenty coolant channels side by side",
    story="Veldermoor pilot line, mould plates 1 to 20 (invented). One column a channel, one formula a cell.",
    names=tuple(f"plate {k}" for k in _ZONES),
    rows=(
        ("flow kind", "", ("duct",) * 20),
        ("substance", "", ("water",) * 10 + ("MEG 30 % by mass",) * 10),
        ("velocity", "m/s", tuple(round(0.4 + 0.3 * (k % 10), 2) for k in _ZONES)),
        ("diameter", "mm", tuple(6 + 2 * (k % 4) for k in _ZONES)),
        ("length", "m", tuple(round(0.6 + 0.2 * (k % 5), 1) for k in _ZONES)),
        ("inlet temperature", "degC", tuple(14 + k % 6 for k in _ZONES)),
        ("wall temperature", "degC", tuple(40 + 2 * (k % 7) for k in _ZONES)),
        ("pressure", "bar", (3.2,) * 20),
        ("time scale", "s", (90,) * 20),
    ),
    results=(
        ("Reynolds number", "", "0"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.0"),
        ("pressure drop", "kPa", "0.00"),
    ),
    terms=("storage", "conduction along", "viscous heating"),
)
