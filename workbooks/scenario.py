"""The scenario of the samples: the Veldermoor pilot line, invented, with nobody real in it."""

from pages.effects import Effects
from pages.methods import MethodSweep
from pages.outside import Outside
from pages.regimes import RegimeMap

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
    title="Slow liquid metal under a band heater",
    story="Veldermoor pilot line, purification loop (invented). Sodium trickles through a heated tube, and heat runs "
    "against the stream.",
    block="sodium",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "sodium", None, None),
        ("velocity", 6, "mm/s", 0.4),
        ("diameter", 25, "mm", None),
        ("length", 120, "mm", None),
        ("inlet temperature", 280, "degC", 2),
        ("heat flux", 10, "kW/m2", 0.3),
        ("wall thickness", 1.5, "mm", None),
        ("wall conductivity", 19, "W/mK", None),
        ("answer", "outlet temperature", None, None),
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
        ("wall temperature", "degC", "0.0"),
        ("duty", "W", "0"),
    ),
    question="May the temperature at the heater's end be calculated without conduction along the stream?",
    sweep=("velocity", "mm/s", (2, 4, 6, 12, 20, 30), "conduction along"),
    sweep_measure="effect",
    pages=(
        Effects(
            "The same terms, left out of the stream's temperature at the heater's end and of the wall's there.",
            (("outlet temperature", "K"), ("wall temperature", "K")),
            (("conduction along", "velocity", "mm/s", "0.5 K", "wall temperature"),),
        ),
        RegimeMap(
            "conduction along",
            ("velocity", "mm/s", (1.5, 2.5, 4, 6, 9, 14, 25)),
            ("length", "mm", (15, 30, 60, 120, 240)),
        ),
    ),
)

DIE = CaseSheet(
    title="Flat die of a sheet line",
    story="Veldermoor pilot line, sheet die (invented). A melt is pressed through a slot between heated walls: the "
    "heat it makes by shear is what warms it.",
    block="die",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "HDPE melt", None, None),
        ("section", "plates", None, None),
        ("velocity", 150, "mm/s", 6),
        ("gap", 1.5, "mm", 0.03),
        ("width", 180, "mm", None),
        ("length", 70, "mm", None),
        ("inlet temperature", 188, "degC", 1),
        ("wall temperature", 196, "degC", 1),
        ("answer", "outlet temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("viscosity", "Pa s", "0"),
        ("Reynolds number", "", "0.0E+00"),
        ("Péclet number", "", "0"),
        ("Brinkman number", "", "0.00"),
        ("Nahme number", "", "0.000"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.00"),
        ("pressure drop", "bar", "0.0"),
    ),
    question="May the melt temperature be calculated without the heat made by shear?",
    sweep=("velocity", "mm/s", (40, 60, 90, 120, 150, 190), "viscous heating"),
    sweep_measure="effect",
    pages=(
        Effects(
            "The same terms, left out of the melt temperature, of what the walls give, and of their flux at the lip.",
            (("outlet temperature", "K"), ("duty", "W"), ("local flux", "W/m2")),
        ),
        RegimeMap(
            "viscous heating",
            ("velocity", "mm/s", (30, 45, 60, 80, 110, 150, 190)),
            ("length", "mm", (8, 15, 30, 70, 140, 280)),
        ),
    ),
)

GAS_LINE = CaseSheet(
    title="Fast gas in a heated line",
    story="Veldermoor pilot line, purge heater (invented). Nitrogen rushes through a tube: friction warms it, "
    "expansion cools it; the bulk keeps its temperature, the wall does not.",
    block="purge",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "nitrogen", None, None),
        ("velocity", 60, "m/s", 2),
        ("diameter", 12, "mm", None),
        ("length", 1, "m", None),
        ("inlet temperature", 20, "degC", 1),
        ("heat flux", 10, "kW/m2", 0.4),
        ("pressure", 8, "bar", 0.1),
        ("answer", "wall temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("Reynolds number", "", "0"),
        ("Prandtl number", "", "0.000"),
        ("Mach number", "", "0.000"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.00"),
        ("wall temperature", "degC", "0.00"),
        ("pressure drop", "kPa", "0.0"),
        ("recovery rise", "K", "0.00"),
    ),
    question="May the wall temperature be calculated without friction heat and expansion?",
    sweep=("velocity", "m/s", (10, 20, 30, 45, 60, 90), "viscous heating"),
    sweep_measure="effect",
    pages=(
        Effects(
            "Friction heat and expansion go as a pair: next to nothing in the stream, kelvins at the wall.",
            (("outlet temperature", "K"), ("wall temperature", "K")),
            remarks=(
                "The stream loses what its speed takes up; an unheated wall would stand above it by the recovery rise.",
            ),
        ),
        RegimeMap(
            "viscous heating",
            ("velocity", "m/s", (8, 15, 25, 40, 60, 80, 100)),
            ("heat flux", "kW/m2", (1, 3, 10, 30, 60)),
            "wall temperature",
            "Map of the wall",
        ),
        RegimeMap(
            "viscous heating",
            ("velocity", "m/s", (8, 15, 25, 40, 60, 80, 100)),
            ("heat flux", "kW/m2", (1, 3, 10, 30, 60)),
            "outlet temperature",
            "Map of the stream",
        ),
    ),
)

YARD = Outside(
    rows=(
        ("substance", "", "air"),
        ("surface", "", "horizontal cylinder"),
        ("direction", "", "transverse"),
        ("velocity", "m/s", 4),
        ("diameter", "mm", "=Case!$B$11+2*Case!$B$15+2*Case!$B$18"),
        ("length", "m", "=Case!$B$12"),
        ("stream temperature", "degC", "=Case!$B$21"),
        ("emissivity", "", 0.3),
        ("surroundings temperature", "degC", -20),
        ("temperature beyond the wall", "degC", "=Case!$B$13"),
        ("coefficient beyond the wall", "W/m2K", 3500),
        ("insulation thickness", "mm", "=Case!$B$18"),
        ("insulation conductivity", "W/mK", "=Case!$B$19"),
        ("wall thickness", "mm", "=Case!$B$15"),
        ("wall conductivity", "W/mK", "=Case!$B$16"),
    ),
    winds=(0.1, 0.25, 0.5, 1, 2, 4, 8, 16),
    remarks=(
        "The sheet Case takes the coefficient of wind and buoyancy with radiation as its outside coefficient.",
        "Radiation is told over the same difference, jacket to air; it goes to the cold sky, so it grows as wind cools "
        "the jacket.",
        "The water has its inlet temperature all along and a round number for its coefficient: both hardly count.",
    ),
)

WARM_PIPE = CaseSheet(
    title="Warm water pipe outdoors",
    story="Veldermoor pilot line, yard pipe (invented). Insulated steel pipe from the boiler house to the far shed "
    "on a winter night; the coefficient outside comes from the sheet Outside.",
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
        ("outside coefficient", f"={YARD.coefficient_cell}", "W/m2K", 6),
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
    sweep_measure="effect",
    pages=(YARD,),
)

SAMPLES = {
    "coolant_channel.xlsx": COOLANT,
    "oil_film.xlsx": FILM,
    "sodium_duct.xlsx": SODIUM,
    "flat_die.xlsx": DIE,
    "gas_line.xlsx": GAS_LINE,
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

METHODS_FILE = "methods.xlsx"
METHODS = MethodSweep(
    title="Cooling water in a tube",
    story="Veldermoor pilot line, oil cooler (invented). Water in a tube held at one temperature, from a trickle to "
    "full flow.",
    block="tube",
    rows=(
        ("flow kind", "duct", None),
        ("substance", "water", None),
        ("volume flow", 12, "L/min"),
        ("diameter", 16, "mm"),
        ("length", 2.5, "m"),
        ("inlet temperature", 20, "degC"),
        ("wall temperature", 60, "degC"),
        ("pressure", 3, "bar"),
    ),
    sweep=("volume flow", "L/min", (0.6, 0.8, 1.2, 1.6, 2, 2.5, 3.5, 5, 7, 10, 15, 20, 30, 45, 60)),
)
