"""How well `cellfuncs check` finds seeded slips: recall, precision, causes, clean sheets, time.

Sheets come from ``corpus`` by their seeds. The score of two thirds of them is printed first, that of the third kept
aside last; only the second counts against the targets.
"""

from corpus.score import Score, is_aside, score, table

SEEDS = range(600)
TARGETS = (
    ("recall", 0.95),
    ("precision", 0.97),
    ("causes", 0.90),
)
# s for a sheet of 200 filled cells, imports aside
SECONDS, FILLED = 0.3, 200.0

Measured = tuple[str, float, float, str, str]
printed: list[str] = []


def targets() -> Measured:
    """cellfuncs check on sheets with seeded slips: the targets that are missed."""
    warm_up()
    printed.clear()
    tuned = score(seed for seed in SEEDS if not is_aside(seed))
    aside = score(seed for seed in SEEDS if is_aside(seed))
    printed.append(f"Sheets with seeded slips, two thirds:\n{table(tuned)}")
    printed.append(f"Sheets with seeded slips, the third kept aside:\n{table(aside)}")
    return "checks, targets missed on sheets kept aside", float(len(missed(aside))), 0.0, "", in_a_line(aside)


def warm_up() -> None:
    """One sheet before the clock runs, for the imports."""
    score([0])


def missed(found: Score) -> list[str]:
    """The targets that a score does not reach."""
    short = [name for name, least in TARGETS if getattr(found, name) < least]
    if found.clean_errors:
        short.append("clean sheets")
    if found.seconds > found.filled / FILLED * SECONDS:
        short.append("time")
    return short


def in_a_line(found: Score) -> str:
    """The score in a line."""
    seconds = found.seconds / max(found.filled, 1) * FILLED
    return (
        f"recall {found.recall:.1%}, precision {found.precision:.1%}, cause right {found.causes:.1%}, "
        f"{found.clean_errors} of {found.clean} clean sheets with an error, {seconds:.2f} s for 200 filled cells"
    )
