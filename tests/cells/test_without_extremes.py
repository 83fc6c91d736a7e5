"""Cases far beyond anything sensible: every effect is a finite number or a refusal in words; no warning, no stderr."""

import math
import random

import pytest

TERMS = (
    "storage", "conduction along", "wall conduction", "viscous heating", "pressure work", "volumetric source",
    "wall radiation",
)  # fmt: skip
ANSWERS = (None, "outlet temperature", "wall temperature", "peak temperature", "coefficient", "duty", "local flux")
CASES = 60  # of each flow kind


class Extremes:
    """Rows with numbers over many decades, the same for the same seed."""

    def __init__(self, seed: int):
        self.random = random.Random(seed)

    def size(self, low: float, high: float) -> float:
        return 10.0 ** self.random.uniform(low, high)

    def near(self, level: float, low: float, high: float) -> float:
        return level + self.random.choice((-1.0, 1.0)) * self.size(low, high)

    def fluid(self):
        return [
            ["density", self.size(-1, 4), "kg/m3"], ["viscosity", self.size(-6, 5), "Pa s"],
            ["conductivity", self.size(-2, 2.6), "W/mK"], ["specific heat", self.size(2, 4), "J/kgK"],
            ["expansion coefficient", self.random.choice((1e-4, 3e-3, 0.1, -1e-4)), "1/K"],
        ]  # fmt: skip

    def duct(self):
        rows = [
            *self.fluid(), [self.random.choice(("diameter", "gap")), self.size(-6, 1), "m"],
            ["velocity", self.size(-8, 3), "m/s"], ["length", self.size(-6, 6), "m"],
            ["inlet temperature", 300.0, "K"], ["flow area", 1e-3, "m2"],
        ]  # fmt: skip
        kind = self.random.choice(("wall", "flux", "none", "path", "stated"))
        if kind in ("wall", "stated"):
            rows += [["wall temperature", self.near(300.0, -6, 2.3), "K"]]
        if kind == "flux":
            rows += [["heat flux", self.near(0.0, -6, 8), "W/m2"]]
        if kind == "none":
            rows += [["wall temperature", 300.0, "K"]]
        if kind == "path":
            rows += [["outside temperature", 280.0, "K"], ["outside coefficient", self.size(-2, 4), "W/m2K"]]
        if kind == "stated":
            rows += [["coefficient", self.size(-3, 6), "W/m2K"]]
        elif self.random.random() < 0.3:
            rows += [
                ["wall thickness", self.size(-5, 0), "m"], ["wall conductivity", self.size(-2, 3), "W/mK"],
                ["wall density", 8000.0, "kg/m3"], ["wall specific heat", 500.0, "J/kgK"],
            ]  # fmt: skip
        return rows

    def gap(self):
        return [
            *self.fluid(), ["gap", self.size(-7, 0), "m"], ["velocity", self.size(-6, 3), "m/s"],
            ["length", self.size(-5, 3), "m"], ["wall temperature", 300.0, "K"],
            ["second wall temperature", 300.0 + self.size(-5, 2.5), "K"],
        ]  # fmt: skip

    def plate(self):
        return [
            *self.fluid(), ["length", self.size(-5, 2), "m"], ["velocity", self.size(-6, 3.5), "m/s"],
            ["width", 1.0, "m"], ["stream temperature", 300.0, "K"],
            ["wall temperature", self.near(300.0, -6, 2.4), "K"], *self.radiating(),
        ]  # fmt: skip

    def free(self):
        return [
            *self.fluid(), ["surface", "vertical plate"], ["length", self.size(-4, 2), "m"], ["width", 1.0, "m"],
            ["stream temperature", 300.0, "K"], ["wall temperature", self.near(300.0, -5, 2.4), "K"],
            *self.radiating(),
        ]  # fmt: skip

    def body(self):
        rows = [row for row in self.fluid() if row[0] not in ("viscosity", "expansion coefficient")]
        return [
            *rows, ["coefficient", self.size(-3, 6), "W/m2K"], ["length", self.size(-5, 1), "m"],
            ["time", self.size(-6, 9), "s"], ["initial temperature", 300.0 + self.size(-4, 3), "K"],
            ["stream temperature", 300.0, "K"], *self.radiating(),
        ]  # fmt: skip

    def radiating(self):
        if self.random.random() < 0.5:
            return []
        return [["emissivity", self.random.random(), ""], ["surroundings temperature", self.size(1.5, 3.2), "K"]]

    def block(self, flow: str):
        rows = [["flow kind", flow], *getattr(self, flow)()]
        if flow in ("duct", "plate") and self.random.random() < 0.3:
            rows += [["time scale", self.size(-6, 8), "s"]]
        if self.random.random() < 0.3:
            rows += [["volumetric source", self.near(0.0, -4, 12), "W/m3"]]
        return [*rows, ["beyond range", "allow"]] if flow != "body" and self.random.random() < 0.5 else rows


@pytest.mark.parametrize("flow", ["duct", "gap", "plate", "free", "body"])
def test_every_effect_is_a_number_or_a_refusal(cf, flow, capfd):
    numbers = 0
    for seed in range(CASES):
        draw = Extremes(1000 * len(flow) + seed)
        block = draw.block(flow)
        table = cf("TERMS", block)
        answers = [
            cf("WITHOUT", block, term, answer)
            for term in draw.random.sample(TERMS, 3) for answer in draw.random.sample(ANSWERS, 2)
        ]  # fmt: skip
        for answer in (*answers, *([table] if isinstance(table, str) else [])):
            if isinstance(answer, str):
                assert answer.startswith("! ") and len(answer) <= 255 and "broke off" not in answer, (block, answer)
            else:
                assert isinstance(answer, float) and math.isfinite(answer), block
                numbers += 1
    assert numbers > CASES // 4
    assert capfd.readouterr().err == ""
