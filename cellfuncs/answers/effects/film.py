"""A sheared gap, solved: the heat of friction, with a viscosity that falls with temperature, and a source."""

from cellfuncs.answers import Solution
from cellfuncs.answers.effects.model import FLUX, PEAK, SOURCE, EffectModel
from cellfuncs.answers.gap import GapAnswers
from cellfuncs.errors import CellfuncsError, NoModel

_POINTS = 9  # viscosities over the film's temperatures
_CARRIED = 5.0  # Uh²/(αL) up to which a film is warm over most of its length; the mean effect is a fifth of it
_MARGIN = 1.0  # K above what a constant viscosity would give
_WEAK = 1e-3  # relative change of the viscosity that is none


class HeatedFilm(EffectModel):
    """The film between walls of given temperatures; with the substance's own viscosities where it has them."""

    name = "heated film, solved"
    terms = frozenset({"viscous heating", SOURCE})
    answers = (PEAK, FLUX)

    def __init__(self, solution: Solution):
        a = solution.answers
        if not isinstance(a, GapAnswers):
            raise NoModel("no sheared gap")
        self.solution, self.a = solution, a
        self.unit = a.difference  # K
        carried = a.velocity * a.gap**2 / (a.properties.diffusivity * a.length)
        if carried > _CARRIED:
            raise NoModel(
                f"a developed film is solved; this one is carried off before heat crosses it, Uh²/(αL) = {carried:.3g}"
            )
        self.spread = carried / _CARRIED
        self.thinning, self.reference = self._viscosities()

    def _viscosities(self):
        """Thinning over θ = (T − T_cold)/unit and the viscosity that Br is on."""
        from cellfuncs.models import gap

        a, case = self.a, self.solution.case
        mean = a.properties.viscosity
        if case.fixed or a.cold is None or case.sheared(a.property_temperature) is not None:
            return gap.constant, mean
        from cellfuncs.models.chebyshev import nodes

        hottest = a.walls_apart + (a.full_rise / 8.0 if not a.walls_apart else a.peak_rise) + _MARGIN
        try:
            relative = [case.properties(a.cold + hottest * x).viscosity / mean for x in nodes(_POINTS)[0].tolist()]
        except CellfuncsError as error:
            raise NoModel(f"the film may come to {a.cold + hottest - 273.15:.0f} degC: {error}") from None
        if max(relative) / min(relative) - 1.0 < _WEAK:
            return gap.constant, mean
        return gap.smooth(0.0, hottest / self.unit, relative), mean

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        from cellfuncs.models import gap

        a, p = self.a, self.a.properties
        q = 0.0 if SOURCE in left else self.solution.case.get("volumetric_source", 0.0)
        heating = 0.0 if "viscous heating" in left else self.reference * a.velocity**2 / (p.conductivity * self.unit)
        film = gap.at_speed(
            gap.Gap(self.thinning, 0.0, a.walls_apart / self.unit, source=q * a.gap**2 / (p.conductivity * self.unit)),
            heating,
        )
        if answer == PEAK:
            return film.peak * self.unit, (film.peak + film.error) * self.unit
        if answer == FLUX:
            over = p.conductivity * self.unit / a.gap
            return film.low_flux * over, (film.low_flux + film.error) * over
        raise NoModel(f"{self.name}: {answer} is not solved")

    def base(self, answer: str, without: float) -> float | None:
        if answer == PEAK:
            return self.a.walls_apart or None
        return self.a.properties.conductivity * self.a.walls_apart / self.a.gap or None

    def scale(self, answer: str, without: float) -> float:
        return self.unit if answer == PEAK else self.a.properties.conductivity * self.unit / self.a.gap
