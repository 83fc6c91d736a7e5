"""The files of the extension for LibreOffice Calc, from the catalogue; `compile_types.py` writes them.

The interface of the functions is compiled to cellfuncs.rdb, which stays in the repository because users have no
SDK, and so does the whole extension (`installer.READY`), which names no Python.
"""

import json
from pathlib import Path
from xml.sax.saxutils import escape, quoteattr

import cellfuncs
from cellfuncs.cells import catalogue
from cellfuncs.hosts.calc.installer import IDENTIFIER, SETTINGS, pack

HERE = Path(__file__).resolve().parent
SERVICE = "cellfuncs.Functions"  # Calc writes it before our names: CELLFUNCS.FUNCTIONS.CF_…
INTERFACE = "XFunctions"
REPAIR = "cellfuncs.Repair"
DOCUMENT = "com.sun.star.sheet.SpreadsheetDocument"
EVENTS = ("onDocumentAdded", "onDocumentOpened")  # loaded, with a window or without; shown in a window
RDB = HERE / "cellfuncs.rdb"
IN_OFFICE = Path(cellfuncs.__file__).resolve().parent / "hosts" / "calc" / "office"
OLDEST_OFFICE = "7.0"
CATEGORY = "Add-In"  # Calc knows no groups but its own; the family stands first in the help

# In the catalogue these count as tables, yet their answer is one cell: a text there must compare as a text does.
ONE_CELL = {"CF_FAULTS", "CF_TERM", "CF_AGREES", "CF_CAUSE"}
# Calc hands a range with an error value over to none of the other functions; counting errors is the work of this one.
REFERENCE = {"CF_FAULTS"}
RETURNED = {"cell": "any", "reference": "any", "table": "sequence< sequence<any> >"}

# The order counts: the types must be known when the component is registered.
MANIFEST = (
    ("application/vnd.sun.star.uno-typelibrary;type=RDB", "cellfuncs.rdb"),
    ("application/vnd.sun.star.uno-components", "cellfuncs.components"),
    ("application/vnd.sun.star.configuration-data", "CalcAddIns.xcu"),
    ("application/vnd.sun.star.configuration-data", "Jobs.xcu"),
)
HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n'


def kind_of(function: catalogue.CellFunction) -> str:
    """How Calc calls a function: `cell` (one value, or rows over a range), `table` or `reference`."""
    if function.name in REFERENCE:
        return "reference"
    return "table" if function.returns == "table" and function.name not in ONE_CELL else "cell"


def camel(name: str) -> str:
    """The name of an argument as the interface language allows it: relative_humidity -> relativeHumidity."""
    first, *rest = name.split("_")
    return first + "".join(map(str.capitalize, rest))


def idl() -> str:
    """The interface, one method a function.

    An argument is `any`, so that it takes number, text, range and nothing. An answer is `any` too: texts in rows
    are not equal to any text for Calc 7.4 until they are put together anew, so one cell never comes in rows.
    """
    lines = ["module cellfuncs {", f"interface {INTERFACE} {{"]
    for function in catalogue.functions().values():
        kind = kind_of(function)
        type_name = "com::sun::star::table::XCellRange" if kind == "reference" else "any"
        arguments = ", ".join(f"[in] {type_name} {camel(argument.name)}" for argument in function.arguments)
        lines.append(f"    {RETURNED[kind]} {function.name}({arguments});")
    return "\n".join([*lines, "};", f"service Functions : {INTERFACE};", "};", ""])


def _prop(name: str, text: str, local: bool = False) -> str:
    language = ' xml:lang="en"' if local else ""
    return f"<prop oor:name={quoteattr(name)}><value{language}>{escape(text)}</value></prop>"


def _node(name: str, *inside: str, op: str = "") -> str:
    how = f' oor:op="{op}"' if op else ""
    return "\n".join((f"<node oor:name={quoteattr(name)}{how}>", *inside, "</node>"))


def _settings(name: str, *nodes: str) -> str:
    spaces = 'xmlns:oor="http://openoffice.org/2001/registry" xmlns:xs="http://www.w3.org/2001/XMLSchema"'
    opening = f'<oor:component-data {spaces} oor:name="{name}" oor:package="org.openoffice.Office">'
    return "\n".join((HEAD + opening, *nodes, "</oor:component-data>", ""))


def add_ins() -> str:
    """Names, help and help of the arguments, as the function wizard shows them."""
    nodes = []
    for function in catalogue.functions().values():
        arguments = [
            _node(
                camel(argument.name),
                _prop("DisplayName", argument.name.replace("_", " "), local=True),
                _prop("Description", argument.help + ("" if argument.optional else " (required)"), local=True),
                op="replace",
            )
            for argument in function.arguments
        ]
        nodes.append(
            _node(
                function.name,
                _prop("DisplayName", function.name, local=True),
                _prop("Description", f"{function.family}: {function.summary}", local=True),
                _prop("Category", CATEGORY),
                _prop("CompatibilityName", function.name, local=True),
                _node("Parameters", *arguments),
                op="replace",
            )
        )
    return _settings("CalcAddIns", _node("AddInInfo", _node(SERVICE, _node("AddInFunctions", *nodes), op="replace")))


def jobs() -> str:
    """The repair, for every spreadsheet that is opened. No AdminTime: an empty one switches the job off."""
    name = "cellfuncs.repair"
    job = _node(name, _prop("Service", REPAIR), _prop("Context", DOCUMENT), op="replace")
    bound = _node("JobList", _node(name, op="replace"))
    events = [_node(event, bound, op="fuse") for event in EVENTS]
    return _settings("Jobs", _node("Jobs", job), _node("Events", *events))


def components() -> str:
    """Passive registration: an active one would ask for types that are not known yet."""
    services = {SERVICE: "com.sun.star.sheet.AddIn", REPAIR: "com.sun.star.task.Job"}
    inside = "\n".join(
        f'<implementation name="{name}.implementation">'
        f'<service name="{name}"/><service name="{general}"/></implementation>'
        for name, general in services.items()
    )
    return (
        f'{HEAD}<components xmlns="http://openoffice.org/2010/uno-components">\n'
        f'<component loader="com.sun.star.loader.Python" uri="component.py">\n{inside}\n</component>\n</components>\n'
    )


def manifest() -> str:
    """What the parts of the extension are."""
    entries = "\n".join(
        f'<manifest:file-entry manifest:media-type="{kind}" manifest:full-path="{path}"/>' for kind, path in MANIFEST
    )
    space = 'xmlns:manifest="http://openoffice.org/2001/manifest"'
    return f"{HEAD}<manifest:manifest {space}>\n{entries}\n</manifest:manifest>\n"


def description() -> str:
    """Name, version and the oldest office that may take it."""
    return (
        f'{HEAD}<description xmlns="http://openoffice.org/extensions/description/2006"'
        ' xmlns:l="http://libreoffice.org/extensions/description/2011">\n'
        f'<identifier value="{IDENTIFIER}"/>\n<version value="{cellfuncs.__version__}"/>\n'
        '<display-name><name lang="en">Cellfuncs</name></display-name>\n'
        f'<dependencies><l:LibreOffice-minimal-version value="{OLDEST_OFFICE}" name="LibreOffice {OLDEST_OFFICE}"/>'
        "</dependencies>\n</description>\n"
    )


def contents() -> dict[str, bytes]:
    """Every file of the extension."""
    kinds = {function.name: kind_of(function) for function in catalogue.functions().values()}
    settings = {"version": cellfuncs.__version__, "command": [], "functions": kinds}
    texts = {
        "META-INF/manifest.xml": manifest(),
        "description.xml": description(),
        "cellfuncs.components": components(),
        "CalcAddIns.xcu": add_ins(),
        "Jobs.xcu": jobs(),
        SETTINGS: json.dumps(settings, indent=1),
    }
    files = {name: text.encode("utf-8") for name, text in texts.items()}
    files["cellfuncs.rdb"] = RDB.read_bytes()
    for path in sorted(IN_OFFICE.glob("*.py")):
        place = "" if path.name == "component.py" else "pythonpath/cellfuncs_in_office/"
        files[place + path.name] = path.read_text("utf-8").encode("utf-8")  # the same line ends everywhere
    return files


def build(out: Path) -> None:
    """Write the extension, without a Python in it."""
    pack(out, contents())
