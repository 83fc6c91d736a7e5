"""A sheared gap, solved: the heat of friction, with a viscosity that falls with temperature, and a source."""

from cellfuncs.answers import Solution
from cellfuncs.answers.effects.model import FLUX, PEAK, SOURCE, EffectModel
from cellfuncs.answers.gap import GapAnswers
from cellfuncs.errors import CellfuncsError, NoModel

_POINTS = 9  # viscosities over the film's temperatures
_DEVELOPING_SPREAD = 0.3  # of what is not yet developed: walls apart, and a viscosity that changes on the way
_MARGIN = 1.0  # K above what a constant viscosity would give
_WEAK = 1e-3  # relative change of the viscosity that is none


class HeatedFilm(EffectModel):
    """The film between walls of given temperatures, at its end; with the viscosities of the substance."""

    name = "heated film, solved"
    terms = frozenset({"viscous heating", SOURCE})
    answers = (PEAK, FLUX)

    def __init__(self, solution: Solution):
        a = solution.answers
        if not isinstance(a, GapAnswers):
            raise NoModel("no sheared gap")
        self.solution, self.a = solution, a
        self.unit = a.difference  # K
        from cellfuncs.models.developing_film import developing

        # heat is carried off before it has crossed a short film: part of the developed values is reached at its end
        self.part = developing(a.properties.diffusivity * a.length / (a.velocity * a.gap**2))
        self.spread = _DEVELOPING_SPREAD * (1.0 - min(self.part.peak, 1.0))
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
        apart, part = a.walls_apart / self.unit, self.part
        off = film.error + part.error * abs(film.peak - apart)
        if answer == PEAK:
            peak = apart + part.peak * (film.peak - apart)
            return peak * self.unit, (peak + off) * self.unit
        if answer == FLUX:
            over = p.conductivity * self.unit / a.gap
            flux = apart + max(part.low_flux, part.high_flux) * (film.low_flux - apart)
            return flux * over, (flux + 4.0 * off) * over
        raise NoModel(f"{self.name}: {answer} is not solved")

    def base(self, answer: str, without: float) -> float | None:
        if answer == PEAK:
            return self.a.walls_apart or None
        return self.a.properties.conductivity * self.a.walls_apart / self.a.gap or None

    def scale(self, answer: str, without: float) -> float:
        return self.unit if answer == PEAK else self.a.properties.conductivity * self.unit / self.a.gap
