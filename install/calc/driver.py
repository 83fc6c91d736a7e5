"""Runs a LibreOffice of its own and does what tests and bench ask; started under a Python that has `uno`.

A line of JSON comes in, [name, arguments], and a line of JSON goes out, {"result": …} or {"error": text}.
"""

import json
import os
import subprocess
import sys
import time

import uno
from com.sun.star.beans import PropertyValue
from com.sun.star.connection import NoConnectException

FILTERS = {"xlsx": "Calc MS Excel 2007 XML", "ods": "calc8"}
START = 120  # s


def properties(**values):
    return tuple(PropertyValue(name, 0, value, 0) for name, value in values.items())


class Driver:
    """One office and the document that is open in it."""

    def __init__(self, soffice, settings):
        name = f"cellfuncs{os.getpid()}"
        accept = f"--accept=pipe,name={name};urp"
        words = ["--headless", "--norestore", "--nologo", "--nodefault", accept]
        self.process = subprocess.Popen(
            [soffice, *words, *settings], stdout=subprocess.DEVNULL, stdin=subprocess.DEVNULL
        )
        local = uno.getComponentContext()
        resolver = local.ServiceManager.createInstanceWithContext("com.sun.star.bridge.UnoUrlResolver", local)
        end = time.monotonic() + START
        while True:
            try:
                self.context = resolver.resolve(f"uno:pipe,name={name};urp;StarOffice.ComponentContext")
                break
            except NoConnectException:
                if time.monotonic() > end or self.process.poll() is not None:
                    raise
                time.sleep(0.1)
        self.desktop = self.make("com.sun.star.frame.Desktop")
        self.document = None

    def make(self, service):
        return self.context.ServiceManager.createInstanceWithContext(service, self.context)

    def new(self):
        """A new document in place of the one before."""
        return self.open(None)

    def open(self, path, hidden=True):
        """Open a file (None makes a new document) in place of the one before; seconds that it took."""
        self.close()
        start = time.perf_counter()
        url = uno.systemPathToFileUrl(path) if path else "private:factory/scalc"
        self.document = self.desktop.loadComponentFromURL(url, "_blank", 0, properties(Hidden=hidden))
        if self.document is None:
            raise RuntimeError(f"{path} does not open; it may be open elsewhere")
        return time.perf_counter() - start

    def close(self):
        if self.document is not None:
            self.document.close(True)
            self.document = None

    def cells(self, place):
        sheet, _, area = place.rpartition("!")
        sheets = self.document.Sheets
        return (sheets.getByName(sheet) if sheet else sheets.getByIndex(0)).getCellRangeByName(area)

    def fill(self, place, rows):
        """Write rows of numbers, texts and formulas (with ; between arguments)."""
        self.cells(place).FormulaArray = tuple(tuple(str(cell) for cell in row) for row in rows)

    def fill_down(self, place):
        """Copy the first row of a range down to its end."""
        self.cells(place).fillAuto(uno.Enum("com.sun.star.sheet.FillDirection", "TO_BOTTOM"), 1)

    def values(self, place, rows):
        """Write rows of numbers and texts."""
        self.cells(place).DataArray = tuple(map(tuple, rows))

    def formula(self, place, text):
        """Write one formula and give its value."""
        self.cells(place).Formula = text
        return self.read(place)[0][0]

    def array(self, place, text):
        """Enter an array formula and give its values."""
        self.cells(place).setArrayFormula(text)
        return self.read(place)

    def formulas(self, place):
        return self.cells(place).FormulaArray

    def read(self, place):
        """Values in rows; an error is its name in a list."""
        cells = self.cells(place)
        rows = [list(row) for row in cells.DataArray]
        for i, row in enumerate(rows):
            for j, value in enumerate(row):
                if value is None:
                    row[j] = [cells.getCellByPosition(j, i).String]
        return rows

    def sheets(self):
        """Name of each sheet -> its used area and the number of its charts."""
        found = {}
        for sheet in self.document.Sheets:
            cursor = sheet.createCursor()
            cursor.gotoEndOfUsedArea(True)
            found[sheet.Name] = [cursor.AbsoluteName.rpartition(".")[2].replace("$", ""), sheet.Charts.Count]
        return found

    def recalculate(self):
        """Calculate every cell anew; seconds that it took."""
        start = time.perf_counter()
        self.document.calculateAll()
        return time.perf_counter() - start

    def modified(self):
        return self.document.isModified()

    def save(self, path, kind):
        self.document.storeToURL(uno.systemPathToFileUrl(path), properties(FilterName=FILTERS[kind]))

    def wizard(self, beginning):
        """What the function wizard shows: name -> help, and name and help of each argument."""
        descriptions = self.make("com.sun.star.sheet.FunctionDescriptions")
        found = {}
        for k in range(descriptions.Count):
            one = {part.Name: part.Value for part in descriptions.getByIndex(k)}
            if one["Name"].startswith(beginning):
                found[one["Name"]] = [
                    one["Description"],
                    [[part.Name, part.Description] for part in one["Arguments"] or ()],
                ]
        return found

    def end(self):
        self.close()
        try:
            self.desktop.terminate()
        except uno.getClass("com.sun.star.lang.DisposedException"):
            pass  # it was faster than its answer
        self.process.wait(60)


def main():
    lines = os.fdopen(os.dup(1), "w")
    os.dup2(2, 1)
    driver = Driver(sys.argv[1], sys.argv[2:])
    for line in sys.stdin:
        name, arguments = json.loads(line)
        try:
            reply = {"result": getattr(driver, name)(*arguments)}
        except Exception as error:
            reply = {"error": f"{type(error).__name__}: {error}"}
        lines.write(json.dumps(reply) + "\n")
        lines.flush()
        if name == "end":
            break


if __name__ == "__main__":
    main()
