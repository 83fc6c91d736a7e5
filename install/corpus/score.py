"""Recall, precision and causes on sheets whose slips are known."""

import tempfile
import time
from collections import Counter, defaultdict
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path

from corpus.sheet import Made, make

# every third seed is kept aside: it is looked at only when all is done
ASIDE = 3
COUNTED = ("error", "warning")


@dataclass
class Score:
    """What the check found of what was there."""

    slips: int = 0
    found: int = 0
    cause: int = 0
    right_findings: int = 0
    findings: int = 0
    clean: int = 0
    clean_errors: int = 0
    seconds: float = 0.0
    sheets: int = 0
    filled: int = 0
    by_code: dict[str, Counter] = field(default_factory=lambda: defaultdict(Counter))
    by_layout: dict[str, Counter] = field(default_factory=lambda: defaultdict(Counter))
    by_kind: dict[str, Counter] = field(default_factory=lambda: defaultdict(Counter))
    missed: list[str] = field(default_factory=list)
    wrong: list[str] = field(default_factory=list)
    other_cause: list[str] = field(default_factory=list)

    @property
    def recall(self) -> float:
        return self.found / self.slips if self.slips else 1.0

    @property
    def precision(self) -> float:
        return self.right_findings / self.findings if self.findings else 1.0

    @property
    def causes(self) -> float:
        return self.cause / self.found if self.found else 1.0


def is_aside(seed: int) -> bool:
    """Whether a seed is kept aside until the end."""
    return seed % ASIDE == ASIDE - 1


def score(seeds: Iterable[int]) -> Score:
    """Write and check the sheets of the seeds."""
    from cellfuncs.sheets.check import check_book

    total = Score()
    with tempfile.TemporaryDirectory() as folder:
        for seed in seeds:
            made = make(seed, Path(folder))
            path = Path(folder) / f"{seed}.xlsx"
            start = time.perf_counter()
            findings = check_book(path).findings
            total.seconds += time.perf_counter() - start
            path.unlink()
            _count(total, made, [f for f in findings if f.severity in COUNTED])
    return total


def _count(total: Score, made: Made, findings: list) -> None:
    total.sheets += 1
    total.filled += made.filled
    name = f"{made.seed} {made.kind} {made.layout} {made.system}"
    right = [f for f in findings if f.cell in made.cells]
    total.findings += len(findings)
    total.right_findings += len(right)
    for finding in findings:
        if finding not in right:
            total.wrong.append(
                f"{name} [{made.slip}] {finding.cell} {finding.severity} {finding.code}: {finding.message}"
            )
    if made.slip is None:
        total.clean += 1
        total.clean_errors += any(f.severity == "error" for f in findings)
        return
    tables = (total.by_code[made.slip.code], total.by_layout[made.layout], total.by_kind[made.kind])
    total.slips += 1
    for table in tables:
        table["slips"] += 1
    if not right:
        total.missed.append(f"{name} {made.slip} {made.cells}")
        return
    total.found += 1
    same = any(f.code == made.slip.code for f in right)
    total.cause += same
    for table in tables:
        table["found"] += 1
        table["cause"] += same
    if not same:
        total.other_cause.append(f"{name} {made.slip} -> {right[0].code}: {right[0].cause}")


def table(total: Score) -> str:
    """The score as text."""
    lines = [
        f"{total.sheets} sheets, {total.slips} slips, {total.clean} clean; {total.filled / max(total.sheets, 1):.0f}"
        f" filled cells and {total.seconds / max(total.sheets, 1):.3f} s a sheet",
        f"recall {total.recall:.1%}, precision {total.precision:.1%}, cause right {total.causes:.1%} of those found, "
        f"clean sheets with an error {total.clean_errors}",
        "",
    ]
    for title, rows in (("cause", total.by_code), ("layout", total.by_layout), ("calculation", total.by_kind)):
        lines.append(f"{title:26}{'slips':>7}{'found':>7}{'cause':>7}")
        lines += [f"{name:26}{row['slips']:7}{row['found']:7}{row['cause']:7}" for name, row in sorted(rows.items())]
        lines.append("")
    return "\n".join(lines)
