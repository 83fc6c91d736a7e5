"""The function reference as pages: an index that can be searched, a page a family, pages of tables.

Each page stands alone: its style and its few lines of script are inside, nothing is fetched.
"""

from collections.abc import Iterable, Sequence
from html import escape
from pathlib import Path
from typing import Any

from cellfuncs import __version__
from cellfuncs.sheets import reference
from cellfuncs.sheets.inks import CAUTION, GREY, INK, LINE, RULE, TINT
from cellfuncs.sheets.reference import Example, Facts, Table

_STYLE = f"""
:root {{ color: {INK}; background: #fff; font: 16px/1.45 Calibri, Carlito, "Segoe UI", sans-serif; }}
body {{ max-width: 68rem; margin: 0 auto; padding: 1.2rem 1.5rem 4rem; }}
a {{ color: {RULE}; text-decoration-thickness: 1px; text-underline-offset: 2px; }}
h1 {{ font-size: 1.7rem; margin: 1.2rem 0 .2rem; }}
h2 {{ font-size: 1.15rem; margin: 0 0 .3rem; }}
h2 code {{ font-weight: 700; }}
h3 {{ font-size: 1rem; margin: 1.6rem 0 .3rem; }}
nav {{ display: flex; flex-wrap: wrap; gap: .2rem 1.1rem; align-items: baseline; border-bottom: 1px solid {INK};
  padding-bottom: .5rem; }}
nav form {{ margin-left: auto; }}
nav b {{ font-weight: 700; }}
input {{ font: inherit; color: inherit; background: {TINT}; border: 0; border-left: 4px solid {RULE};
  padding: .25rem .6rem; width: 17rem; max-width: 100%; }}
input:focus-visible, a:focus-visible {{ outline: 2px solid {RULE}; outline-offset: 2px; }}
article {{ border-left: 4px solid {RULE}; padding: .1rem 0 .1rem 1.1rem; margin: 2.2rem 0; break-inside: avoid; }}
article:target {{ background: linear-gradient(to right, {TINT}, #fff 70%); }}
code, .formula {{ font-family: Consolas, "DejaVu Sans Mono", Menlo, monospace; font-size: .9em; }}
.formula {{ background: {TINT}; padding: .35rem .7rem; overflow-wrap: anywhere; }}
.wide {{ overflow-x: auto; }}
table {{ border-collapse: collapse; margin: .5rem 0; font-size: .95rem; }}
th {{ text-align: left; border-bottom: 1px solid {INK}; padding: .15rem 1.1rem .15rem 0; vertical-align: bottom; }}
td {{ border-bottom: 1px dotted {LINE}; padding: .15rem 1.1rem .15rem 0; vertical-align: top; }}
.number {{ text-align: right; font-variant-numeric: tabular-nums; white-space: nowrap; }}
.short {{ white-space: nowrap; }}
.list td:first-child {{ min-width: 12rem; }}
dl {{ display: grid; grid-template-columns: 7rem 1fr; gap: .15rem .8rem; margin: .6rem 0; }}
dt {{ color: {GREY}; }}
dd {{ margin: 0; min-width: 0; }}
.quiet {{ color: {GREY}; font-size: .9rem; }}
p {{ margin: .3rem 0; }}
[hidden] {{ display: none; }}
@media (max-width: 40rem) {{
  body {{ padding: .8rem; }}
  dl {{ grid-template-columns: 1fr; }}
  nav form {{ margin-left: 0; }}
  .short {{ white-space: normal; }}
  .list td:first-child {{ min-width: 0; }}
  td:last-child {{ min-width: 10rem; }}
}}
@media print {{
  :root {{ font-size: 9.5pt; }}
  body {{ max-width: none; padding: 0; }}
  nav {{ display: none; }}
  article {{ margin: 1.2rem 0; }}
  a {{ color: inherit; text-decoration: none; }}
  tr {{ break-inside: avoid; }}
  .wide {{ overflow: visible; }}
}}
"""

# Every word typed must be somewhere in a row, or in what stands for it (data-also).
_SCRIPT = """
const field = document.querySelector("input[name=q]"), rows = [...document.querySelectorAll("tbody.found tr")];
const plain = text => text.normalize("NFD").replace(/[\\u0300-\\u036f]/g, "").toLowerCase();
const texts = rows.map(row => plain(row.textContent + " " + (row.dataset.also || "")));
const none = document.getElementById("none");
function search() {
  const words = plain(field.value).split(/\\s+/).filter(Boolean);
  let count = 0;
  rows.forEach((row, k) => {
    row.hidden = !words.every(word => texts[k].includes(word));
    count += !row.hidden;
  });
  document.querySelectorAll("section.list").forEach(part => {
    part.hidden = !part.querySelector("tbody.found tr:not([hidden])");
  });
  none.hidden = count > 0;
}
field.value = new URLSearchParams(location.search).get("q") || "";
field.addEventListener("input", search);
field.form.addEventListener("submit", event => event.preventDefault());
search();
"""


def write_pages(folder: str | Path) -> list[Path]:
    """Write all pages into a folder; returns their paths. Pages of earlier times that are no longer made go."""
    folder = Path(folder)
    folder.mkdir(parents=True, exist_ok=True)
    written = []
    for name, page in pages().items():
        path = folder / name
        path.write_text(page, "utf-8", newline="\n")
        written.append(path)
    for old in set(folder.glob("*.html")) - set(written):
        old.unlink()
    return written


def pages() -> dict[str, str]:
    """File name -> page."""
    families, tables = reference.by_family(), reference.tables()
    made = _Pages(families, tables)
    found = {"index.html": made.index()}
    found |= {_file(family): made.family(family, entries) for family, entries in families.items()}
    return found | {f"{table.key}.html": made.table(table) for table in tables}


def _file(family: str) -> str:
    return f"{family.lower()}.html"


class _Pages:
    def __init__(self, families: dict[str, list[Facts]], tables: Sequence[Table]):
        self.families, self.tables = families, tables

    def _page(self, title: str, here: str, body: str, script: str = "") -> str:
        names = [("index.html", "Index"), *((_file(family), family) for family in self.families)]
        names += [(f"{table.key}.html", table.title) for table in self.tables]
        links = " ".join(
            f"<b>{escape(name)}</b>" if file == here else f'<a href="{file}">{escape(name)}</a>' for file, name in names
        )
        search = (
            '<form action="index.html"><label>search <input type="search" name="q" '
            'title="any words: a name, a symbol, a quantity" autocomplete="off"></label></form>'
        )
        return (
            f'<!DOCTYPE html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n'
            f'<meta name="viewport" content="width=device-width, initial-scale=1">\n'
            f"<title>{escape(title)} – Cellfuncs</title>\n<style>{_STYLE}</style>\n</head>\n<body>\n"
            f"<nav>{links} {search}</nav>\n{body}\n"
            f'<p class="quiet">Cellfuncs {__version__}. {escape(CAUTION)}</p>\n'
            + (f"<script>{script}</script>\n" if script else "")
            + "</body>\n</html>\n"
        )

    def index(self) -> str:
        parts = [
            "<h1>Function reference</h1>",
            f"<p>{escape(_INTRO)}</p>",
            '<p id="none" hidden>Nothing has all these words.</p>',
        ]
        for family, entries in self.families.items():
            rows = [(_link(_file(family), one.name), escape(one.summary), _also(one)) for one in entries]
            parts.append(_listing(family, _file(family), reference.FAMILY_WORDS.get(family, ""), rows))
        for table in self.tables:
            file = f"{table.key}.html"
            rows = [(_link(file, row[0]), escape(row[_SAYS[table.key]]), " ".join(row)) for row in table.rows]
            parts.append(_listing(table.title, file, table.intro, rows))
        block = _table(("label", "value", "unit", "±"), [["" if c is None else c for c in row] for row in _block()])
        parts.append(f'<h3 id="block">The block of the examples</h3>\n<p>{escape(_BLOCK_WORDS)}</p>\n{block}')
        return self._page("Function reference", "index.html", "\n".join(parts), _SCRIPT)

    def family(self, family: str, entries: Sequence[Facts]) -> str:
        words = reference.FAMILY_WORDS.get(family, "")
        parts = [f"<h1>{escape(family)}</h1>", f"<p>{escape(words)}</p>"]
        grouped = [one for one in entries if one.group is not None]
        if grouped:
            rows = [
                [_Html(f'<a href="#{one.name}">{escape(one.group.name)}</a>'), one.group.symbol, one.group.formula,
                 one.group.compares, one.group.decides]
                for one in grouped
            ]  # fmt: skip
            heads = ("number", "symbol", "formula", "compares", "decides")
            parts.append(_table(heads, rows))
        parts += [_article(one) for one in entries]
        return self._page(family, _file(family), "\n".join(parts))

    def table(self, table: Table) -> str:
        rows = [
            [_Html(f'<span id="{escape(_anchor(row[0]))}">{escape(row[0])}</span>'), *row[1:]] for row in table.rows
        ]
        body = f"<h1>{escape(table.title)}</h1>\n<p>{escape(table.intro)}</p>\n{_table(table.heads, rows)}"
        return self._page(table.title, f"{table.key}.html", body)


_INTRO = (
    "All cell functions of the catalogue, the published correlations, the labels of a case block and the kinds of "
    "quantity. Bad input never gives a number: the cell shows a text that begins with an exclamation mark."
)
_BLOCK_WORDS = (
    "Where an example names coolant, it is this case block. It stands on the sheet Example of functions.xlsx, beside "
    "the cells that other examples mean: labels from A3 down, units in B, and two cases in C and D."
)
_SHORT = 22  # characters of a cell that is not broken over lines
_SAYS = {"correlations": 1, "labels": 2, "kinds": 3}  # the column of a table that its listing shows


class _Html(str):
    """Text that is markup already."""


def _block() -> list[list[Any]]:
    return reference.stored()["block"]


def _anchor(name: str) -> str:
    return name.replace(" ", "-")


def _link(file: str, name: str) -> str:
    return f'<a href="{file}#{escape(_anchor(name))}">{escape(name)}</a>'


def _also(one: Facts) -> str:
    """What a search for a function may name besides the words shown."""
    words = [argument.name.replace("_", " ") for argument in one.arguments]
    words += [argument.kind for argument in one.arguments]
    if one.group is not None:
        words += [one.group.symbol, one.group.decides]
    return " ".join(dict.fromkeys(words))


def _listing(title: str, file: str, words: str, rows: Iterable[tuple[str, str, str]]) -> str:
    lines = "\n".join(
        f'<tr data-also="{escape(also)}"><td>{link}</td><td>{says}</td></tr>' for link, says, also in rows
    )
    return (
        f'<section class="list">\n<h3><a href="{file}">{escape(title)}</a></h3>\n<p class="quiet">{escape(words)}</p>\n'
        f'<table><tbody class="found">\n{lines}\n</tbody></table>\n</section>'
    )


def _table(heads: Sequence[str], rows: Iterable[Sequence[Any]]) -> str:
    rows = list(rows)
    numeric = [any(isinstance(row[k], (int, float)) for row in rows) for k in range(len(heads))]
    head = "".join(
        f'<th class="number">{escape(word)}</th>' if right else f"<th>{escape(word)}</th>"
        for word, right in zip(heads, numeric, strict=True)
    )
    lines = "\n".join(f"<tr>{''.join(map(_cell, row))}</tr>" for row in rows)
    top = f"<thead><tr>{head}</tr></thead>\n" if heads else ""
    return f'<div class="wide"><table>\n{top}<tbody>\n{lines}\n</tbody></table></div>'


def _cell(value: Any) -> str:
    if isinstance(value, _Html):
        return f"<td>{value}</td>"
    if isinstance(value, (int, float)):
        return f'<td class="number">{reference.shown(value)}</td>'
    look = ' class="short"' if len(value) <= _SHORT else ""
    return f"<td{look}>{escape(value)}</td>"


def _article(one: Facts) -> str:
    parts = [
        f'<article id="{one.name}">',
        f"<h2><code>{escape(one.call)}</code></h2>",
        f"<p>{escape(one.summary)}</p>",
    ]
    if one.arguments:
        rows = [
            [_Html(f"<code>{escape(a.name)}</code>"), a.kind, a.unit, "optional" if a.optional else "", a.help]
            for a in one.arguments
        ]
        parts.append(_table(("argument", "kind", "SI unit", "", "help"), rows))
    pairs = [("answers", escape(one.answers))]
    if one.group is not None:
        pairs += [
            ("symbol", escape(one.group.symbol)),
            ("formula", escape(one.group.formula)),
            ("compares", escape(one.group.compares)),
            ("decides", escape(one.group.decides)),
        ]
    pairs.append(("example", f'<div class="formula">{escape(one.formula)}</div>'))
    if one.example is not None:
        if one.example.where:
            pairs[-1] = ("example", f'{pairs[-1][1]}<a class="quiet" href="index.html#block">{one.example.where}</a>')
        pairs.append(("gives", _answer(one.example)))
    pairs.append(("source", escape(one.source)))
    lines = "\n".join(f"<dt>{head}</dt><dd>{said}</dd>" for head, said in pairs)
    return "\n".join([*parts, f"<dl>\n{lines}\n</dl>", "</article>"])


def _answer(example: Example) -> str:
    if not example.is_table:
        return escape(example.single)
    headed = len(example.rows[0]) > 1
    heads = [str(cell) for cell in example.rows[0]] if headed else ()
    made = _table(heads, example.rows[1:] if headed else example.rows)
    left = example.count - len(example.rows)
    return made + (f'<p class="quiet">and {left} more rows</p>' if left else "")
