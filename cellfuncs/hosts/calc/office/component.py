"""The component that LibreOffice loads: our functions for cells, and the repair of documents that are opened."""

import json
import os

import uno
import unohelper
from cellfuncs_in_office import ranges
from cellfuncs_in_office.calls import Helper
from cellfuncs_in_office.repair import repair
from com.sun.star.sheet import ResultEvent, XVolatileResult
from com.sun.star.task import XJob

HERE = os.path.dirname(os.path.abspath(unohelper.fileUrlToSystemPath(__file__) if "://" in __file__ else __file__))
with open(os.path.join(HERE, "helper.json"), encoding="utf-8") as _file:
    SETTINGS = json.load(_file)
helper = Helper(SETTINGS["command"])


class Functions(unohelper.Base, uno.getClass("cellfuncs.XFunctions")):
    """One method a cell function; they are added below."""

    def __init__(self, context):
        self.context = context


class Table(unohelper.Base, XVolatileResult):
    """Rows as the answer of a function that is declared to return `any`.

    Python's bridge cannot return rows with their type there; a result that reports itself at once can.
    """

    def __init__(self, rows):
        self.rows = rows

    def addResultListener(self, listener):
        numbers = all(type(cell) is float for row in self.rows for cell in row)
        event = ResultEvent()
        event.Source = self
        event.Value = uno.Any("[][]double" if numbers else "[][]any", tuple(map(tuple, self.rows)))
        uno.invoke(listener, "modified", (event,))
        self.rows = None  # the listener keeps them; it is only told once

    def removeResultListener(self, listener):
        pass


def one_cell(name):
    """A method for a function whose answer is one cell, or rows over a range."""

    def method(self, *values):
        answer = helper.ask(name, values)
        return Table(answer) if type(answer) is list else answer

    return method


def table(name):
    """A method for a function that is declared to return rows."""

    def method(self, *values):
        answer = helper.ask(name, values)
        return answer if type(answer) is list else ((answer,),)

    return method


def over_reference(name):
    """A method for a function that takes one reference, so that it sees cells with errors too."""

    def method(self, cells):
        return helper.ask(name, (ranges.rows_of(cells) if helper.told is None else (),))

    return method


KINDS = {"cell": one_cell, "table": table, "reference": over_reference}
for _name, _kind in SETTINGS["functions"].items():
    setattr(Functions, _name, KINDS[_kind](_name))


class Repair(unohelper.Base, XJob):
    """Runs when a document is opened."""

    def __init__(self, context):
        self.context = context

    def execute(self, arguments):
        for argument in arguments:
            if argument.Name == "Environment":
                for part in argument.Value:
                    if part.Name == "Model":
                        repair(part.Value, helper)


g_ImplementationHelper = unohelper.ImplementationHelper()
for _class, _name, _service in (
    (Functions, "cellfuncs.Functions", "com.sun.star.sheet.AddIn"),
    (Repair, "cellfuncs.Repair", "com.sun.star.task.Job"),
):
    g_ImplementationHelper.addImplementation(_class, _name + ".implementation", (_name, _service))
