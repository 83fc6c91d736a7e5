"""Cell functions of the family Groups: one a characteristic number, made from ``groups.py``."""

from cellfuncs import groups
from cellfuncs.cells.catalogue import cell_function, nomenclature


def _register(group: groups.Group) -> None:
    code = group.function.__code__
    names = [name for name in code.co_varnames[: code.co_argcount] if name != "gravity"]
    name = f"CF_{group.key.upper()}"
    cell_function(
        name,
        family="Groups",
        summary=f"{group.name[0].upper()}{group.name[1:]}, {group.formula}: compares {group.compares}.",
        returns="number",
        source=group.source,
        example=f"={name}({','.join(nomenclature()[n]['example'] for n in names)})",
        by_array=group.function,
    )(group.function)


for _group in groups.table().values():
    _register(_group)
