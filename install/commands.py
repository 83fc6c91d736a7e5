"""The commands of install/start.py. A new one is a function and a row in COMMANDS."""

import os
import subprocess
import sys
import tempfile
from pathlib import Path

from environment import ROOT, Trouble, clean_variables, environment_folder, prepare

SAMPLE = ROOT / "workbooks" / "coolant_channel.xlsx"
INHERITED = ROOT / "workbooks" / "inherited" / "cooling_water_line.xlsx"
FOUND = 1  # the exit code of a check that found an error


def setup(words: list[str]) -> int:
    """Make or mend the environment, nothing else."""
    if words:
        raise Trouble("setup takes no arguments")
    prepare()
    print(f"Cellfuncs is set up in {environment_folder()}")
    return 0


def demo(words: list[str]) -> int:
    """Recalculate a sample workbook and print its term table; then check a sheet that somebody else wrote."""
    if len(words) > 1:
        raise Trouble("demo takes at most one argument, the folder to write the recalculated workbook to")
    folder = Path(words[0]).absolute() if words else Path(tempfile.gettempdir()) / "cellfuncs-demo"
    python = prepare()
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise Trouble(f"cannot make {folder} ({error.strerror}); name another folder: demo FOLDER") from error
    code = _run([python, "-m", "cellfuncs", "recalc", SAMPLE, "-o", folder / SAMPLE.name])
    if code:
        return code
    page = folder / f"{INHERITED.stem}.html"
    print(f"\nAnd a sheet that somebody else wrote, checked: {INHERITED.name}", flush=True)
    code = _run([python, "-m", "cellfuncs", "check", INHERITED, "--html", page])
    if code not in (0, FOUND):
        return code
    print(f"wrote {page}")
    return 0


def test(words: list[str]) -> int:
    """Run all tests; further words go to pytest."""
    python = prepare()
    # pytest runs in the project's folder, so paths that mean files here are made to mean the same there.
    words = [str(Path(word).absolute()) if os.path.exists(word.split("::")[0]) else word for word in words]
    return _run([python, "-m", "pytest", "-n", "2", *words], ROOT)


def bench(words: list[str]) -> int:
    """Print the measured ratios beside their limits; `bench check` fails when one is missed."""
    return _run([prepare(), ROOT / "install" / "bench.py", *words])


def calc(words: list[str]) -> int:
    """Put Cellfuncs into LibreOffice Calc, or take it out."""
    from calc.command import main as calc_main

    return calc_main(words)


def excel(words: list[str]) -> int:
    """Put the functions into Excel (Windows), make them anew, or take them out."""
    from excel.command import main as excel_main

    return excel_main(words)


def diagnose(words: list[str]) -> int:
    """Say line by line what is right and wrong with an installation."""
    from diagnose import main as diagnose_main

    return diagnose_main(words)


COMMANDS = {
    "demo": (demo, "[FOLDER]"),
    "test": (test, "[PYTEST ARGUMENTS]"),
    "bench": (bench, "[check]"),
    "setup": (setup, ""),
    "excel": (excel, "[--repair | --remove]"),
    "calc": (calc, "[--remove | --out FILE.oxt]"),
    "diagnose": (diagnose, "[excel] [calc]"),
}


def main(words: list[str]) -> int:
    """Run one command; its exit code, or 2 with one line on stderr when it cannot run."""
    if not words or words[0] in ("-h", "--help", "help"):
        print(usage())
        return 0 if words else 2
    if words[0] not in COMMANDS:
        print(f'no command "{words[0]}"; there are {", ".join(COMMANDS)}', file=sys.stderr)
        return 2
    try:
        return COMMANDS[words[0]][0](words[1:])
    except Trouble as trouble:
        print(f"start.py: {trouble.args[0]}", file=sys.stderr)
        return 2
    except KeyboardInterrupt:
        print("start.py: interrupted", file=sys.stderr)
        return 2


def usage() -> str:
    """The commands, one a line."""
    rows = [(f"{name} {rest}".strip(), command.__doc__) for name, (command, rest) in COMMANDS.items()]
    width = max(len(call) for call, _ in rows)
    lines = "\n".join(f"  {call.ljust(width)}  {text}" for call, text in rows)
    return (
        f"python3 install/start.py COMMAND\n\n{lines}\n\n"
        "The first command makes a private environment in .venv (CELLFUNCS_ENV names another place)\n"
        "and needs the network for it; after that everything works offline."
    )


def _run(command: list, folder: Path | None = None) -> int:
    """Run a command of the environment in the foreground; its exit code."""
    process = subprocess.Popen([str(word) for word in command], env=clean_variables(), cwd=folder)
    try:
        code = process.wait()
    except KeyboardInterrupt:
        # The child had the same key press; it may end its own way.
        process.wait()
        raise
    return code if code >= 0 else 128 - code
