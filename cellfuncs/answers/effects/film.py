"""A sheared gap, solved: the heat of friction, with a viscosity that falls with temperature, and a source."""

from cellfuncs.answers import Solution
from cellfuncs.answers.effects.model import FLUX, PEAK, SOURCE, EffectModel
from cellfuncs.answers.gap import GapAnswers
from cellfuncs.errors import CellfuncsError, NoModel

_POINTS = 9  # of the table of viscosities over the film's temperatures
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
        self.thinning, self.reference = self._viscosities()

    def _viscosities(self):
        """Thinning over θ = (T − T_cold)/unit and the viscosity that Br is on."""
        from cellfuncs.models import gap

        a, case = self.a, self.solution.case
        mean = a.properties.viscosity
        if case.fixed or a.cold is None or case.sheared(a.property_temperature) is not None:
            return gap.constant, mean
        hottest = a.walls_apart + a.full_rise / 8.0 + a.peak_rise
        rises, relative = [], []
        for k in range(_POINTS):
            rise = hottest * (k / (_POINTS - 1)) ** 1.5
            try:
                relative.append(case.properties(a.cold + rise).viscosity / mean)
            except CellfuncsError:
                break  # the film reads as far as its substance is known
            rises.append(rise / self.unit)
        if len(rises) < 2:
            return gap.constant, mean
        if max(relative) / min(relative) - 1.0 < _WEAK:
            return gap.constant, mean
        return gap.tabulated(rises, relative), mean

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
