"""A solid body of one temperature in a fluid: source, radiation, storage."""

from cellfuncs.answers import Solution
from cellfuncs.answers.body import BodyAnswers
from cellfuncs.answers.effects.model import DUTY, RADIATION, SOURCE, STORAGE, WALL, EffectModel
from cellfuncs.errors import NoModel
from cellfuncs.groups import STEFAN_BOLTZMANN


class CoolingBody(EffectModel):
    """The lumped body after the stated time."""

    name = "lumped body, solved"
    terms = frozenset({SOURCE, RADIATION, STORAGE})
    answers = (WALL, DUTY)

    def __init__(self, solution: Solution):
        a, case = solution.answers, solution.case
        if not isinstance(a, BodyAnswers):
            raise NoModel("no solid body")
        self.solution, self.a = solution, a
        self.spread = min(a.biot, 1.0)  # the inside lags behind by about this
        self.radiates = case.has("emissivity") and case.has("surroundings_temperature") and a.stream is not None

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        from cellfuncs.models import body

        a, case = self.a, self.solution.case
        if answer == DUTY:
            raise NoModel("the duty at the start is the same with and without; ask for the wall temperature")
        source = radiation = level = seen = 0.0
        if SOURCE not in left:
            source = case.get("volumetric_source", 0.0) * a.length / (a.coefficient * a.difference)
        if self.radiates and RADIATION not in left:
            radiation = case.get("emissivity") * STEFAN_BOLTZMANN * a.stream**3 / a.coefficient
            level, seen = a.difference / a.stream, case.get("surroundings_temperature") / a.stream
        # without storage the body is at once where it settles
        time = 1e3 if STORAGE in left else a.time / a.time_constant
        found = body.lumped(time, source, radiation, level, seen)
        return found.ratio * a.difference, (found.ratio + found.error) * a.difference

    def base(self, answer: str, without: float) -> float | None:
        return self.solution.driving


def lumping(solution: Solution) -> tuple[float, float]:
    """What one temperature throughout hides after the time: by how much mean and middle are off [K].

    The largest of plane wall, long cylinder and sphere of this volume over surface, by the exact series; without
    source and radiation.
    """
    from cellfuncs.models import body

    a = solution.answers
    mean = middle = 0.0
    for shape, ratio in body.SHAPES.items():  # surface times L over volume: L is ratio times volume over surface
        found = body.body(shape, a.biot * ratio, a.fourier / ratio**2)
        mean = max(mean, abs(found.mean - found.lumped))
        middle = max(middle, abs(found.middle - found.lumped))
    return mean * abs(a.difference), middle * abs(a.difference)
