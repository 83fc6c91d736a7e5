"""Cell functions of the family Groups: one a characteristic number, made from ``groups.py``."""

from cellfuncs import groups
from cellfuncs.cells.catalogue import cell_function

_PLAIN_EXAMPLES = {
    "velocity": "2",
    "length": "0.02",
    "diameter": "0.02",
    "stream_length": "3",
    "time": "60",
    "temperature_difference": "15",
    "density": "998",
    "viscosity": "0.001",
    "kinematic_viscosity": "0.000001",
    "specific_heat": "4180",
    "conductivity": "0.6",
    "diffusivity": "0.000000143",
    "expansion": "0.0002",
    "temperature_coefficient": "0.03",
    "coefficient": "850",
    "pressure_difference": "5000",
    "surface_tension": "0.072",
    "speed_of_sound": "1480",
    "mean_free_path": "0.00000007",
    "frequency": "12",
}


def _register(group: groups.Group) -> None:
    code = group.function.__code__
    names = [name for name in code.co_varnames[: code.co_argcount] if name != "gravity"]
    name = f"CF_{group.key.upper()}"
    cell_function(
        name,
        family="Groups",
        summary=f"{group.name}, {group.formula}: compares {group.compares}.",
        returns="number",
        source=group.source,
        example=f"={name}({','.join(_PLAIN_EXAMPLES[n] for n in names)})",
        by_array=group.function,
    )(group.function)


for _group in groups.table().values():
    _register(_group)
