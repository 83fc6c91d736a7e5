"""Free convection at horizontal faces. Ra with the whole driving difference, on area over perimeter unless said.

A free face is a warm one looking up or a cold one looking down; a held face is the other way round.
"""

from typing import Any

from cellfuncs.methods.algebra import where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.free_plate import joined, laminar_plate_factor, laminarity, thick_layer

_FACE = "area over perimeter"
_FREE_FACE = {"surface": ("horizontal plate, free face",)}
_HELD_FACE = {"surface": ("horizontal plate, held face",)}


@method(
    "McAdams upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e11),),
    scatter=0.15,
    property_temperature="film",
    source="mcadams-1954",
    flows=("free",),
    where=_FREE_FACE,
    length=_FACE,
)
def horizontal_free_face(rayleigh: Any) -> Any:
    """Mean Nu of a warm face looking up or a cold one looking down; it steps up by 6 % at Ra 1e7."""
    return where(rayleigh <= 1e7, 0.54 * rayleigh**0.25, 0.15 * rayleigh ** (1 / 3))


@method(
    "Lloyd-Moran upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 2.2e4, 1.6e9),),
    scatter=0.1,
    property_temperature="film",
    source="lloyd-moran-1974",
    flows=("free",),
    where=_FREE_FACE,
    length=_FACE,
)
def horizontal_free_face_measured(rayleigh: Any) -> Any:
    """Mean Nu of a free face of any outline, by mass transfer; it steps up by 4 % where turbulence sets in, Ra 8e6."""
    return where(rayleigh <= 8e6, 0.54 * rayleigh**0.25, 0.15 * rayleigh ** (1 / 3))


@method(
    "Goldstein-Sparrow-Jones upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 1.0, 1e4),),
    scatter=0.15,
    property_temperature="film",
    source="goldstein-1973",
    flows=("free",),
    where=_FREE_FACE,
    length=_FACE,
)
def small_free_face(rayleigh: Any) -> Any:
    """Mean Nu of a small free face; it steps down by 4 % at Ra 200."""
    return where(rayleigh <= 200.0, 0.96 * rayleigh ** (1 / 6), 0.59 * rayleigh**0.25)


@method(
    "Raithby-Hollands upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 1.0, 1e10),),
    scatter=0.1,
    property_temperature="film",
    source="raithby-hollands-1998",
    flows=("free",),
    where=_FREE_FACE,
    length=_FACE,
)
def horizontal_free_face_joined(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a free face from its laminar and turbulent limits, any Pr."""
    laminar = thick_layer(0.835 * laminar_plate_factor(prandtl) * rayleigh**0.25, 1.4)
    turbulent = 0.14 * (1.0 + 0.0107 * prandtl) / (1.0 + 0.01 * prandtl) * rayleigh ** (1 / 3)
    return joined(laminar, turbulent, 10.0)


@method(
    "Heat Atlas upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 1.0, 1e11),),
    scatter=0.15,
    property_temperature="film",
    source="vdi-f2",
    flows=("free",),
    where=_FREE_FACE,
    length=_FACE,
)
def horizontal_free_face_atlas(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a free face, laminar to Ra·f(Pr) 7e4 and turbulent above; it steps down by 13 % there."""
    driven = rayleigh * (1.0 + (0.322 / prandtl) ** (11.0 / 20.0)) ** (-20.0 / 11.0)
    return where(driven <= 7e4, 0.766 * driven**0.2, 0.15 * driven ** (1 / 3))


@method(
    "McAdams lower face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e5, 1e10),),
    scatter=0.2,
    property_temperature="film",
    source="mcadams-1954",
    flows=("free",),
    where=_HELD_FACE,
    length=_FACE,
)
def horizontal_held_face(rayleigh: Any) -> Any:
    """Mean Nu of a warm face looking down or a cold one looking up."""
    return 0.27 * rayleigh**0.25


@method(
    "Fujii-Imura lower face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e6, 1e11), Range("Pr", 2.0, 12.0)),
    scatter=0.15,
    property_temperature="film",
    source="fujii-imura-1972",
    flows=("free",),
    where=_HELD_FACE,
    length="short side of the face",
)
def horizontal_held_strip(rayleigh: Any) -> Any:
    """Mean Nu of a held face in water on its short side, measured."""
    return 0.58 * rayleigh**0.2


@method(
    "Raithby-Hollands lower face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10),),
    scatter=0.15,
    property_temperature="film",
    source="raithby-hollands-1998",
    flows=("free",),
    where=_HELD_FACE,
    length=_FACE,
)
def horizontal_held_face_thick(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a held face, any Pr, with the thick layer at small Ra."""
    thin = 0.527 / (1.0 + (1.9 / prandtl) ** 0.9) ** (2.0 / 9.0) * rayleigh**0.2
    return thick_layer(thin, 2.5)


@method(
    "Heat Atlas lower face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10),),
    scatter=0.15,
    property_temperature="film",
    source="vdi-f2",
    flows=("free",),
    where=_HELD_FACE,
    length=_FACE,
)
def horizontal_held_face_atlas(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a held face, laminar, any Pr."""
    return 0.6 * (rayleigh * laminarity(prandtl, 0.492) ** (-16.0 / 9.0)) ** 0.2
