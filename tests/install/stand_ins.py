"""Stand-ins for what Windows has and this system may not: the modules of pywin32, and an Excel that COM would show.

Only what the installer and xlwings' own import of functions touch is there. The VBA in the stand-in is the real text
of xlwings' template, read from its file (MS-OVBA, section 2.4.1: the compression of VBA source).
"""

import collections
import ctypes
import re
import sys
import types
import zipfile
from pathlib import Path
from unittest.mock import MagicMock

SAVED = b"saved by the stand-in"
NAME_ERROR = -2146826259  # CVErr(xlErrName)
STUBBED = (
    *("pywintypes", "pythoncom", "win32api", "win32con", "win32event", "win32gui", "win32process", "win32timezone"),
    *("win32com", "win32com.client", "win32com.client.gencache", "win32com.server", "win32com.server.dispatcher"),
    *("win32com.server.policy", "win32com.server.util"),
)


class Stub(types.ModuleType):
    """A module in which every name is a class of its own."""

    __path__ = ()
    __file__ = "stub.dll"

    def __getattr__(self, name):
        if name.startswith("__"):
            raise AttributeError(name)
        setattr(self, name, type(name, (), {}))
        return getattr(self, name)


class ComError(Exception):
    """pywintypes.com_error: a code, a text, and what the program said."""


def windows_modules():
    """Put the stubs in place and import xlwings as on Windows; its real module of user-defined functions."""
    for name in STUBBED:
        sys.modules[name] = Stub(name)
        above, _, last = name.rpartition(".")
        if above:
            setattr(sys.modules[above], last, sys.modules[name])
    sys.modules["pywintypes"].com_error = ComError
    sys.modules["pywintypes"].IID = str
    sys.modules["pythoncom"].TypeIIDs = collections.defaultdict(object)
    sys.modules["win32process"].GetWindowThreadProcessId = lambda window: (0, 4711)
    for name in ("windll", "oledll", "PyDLL"):
        setattr(ctypes, name, MagicMock())
    import asyncio  # noqa: F401  (loaded before the platform changes its name)
    import concurrent.futures  # noqa: F401

    import numpy  # noqa: F401

    plain, sys.platform = sys.platform, "win32"
    import xlwings

    sys.platform = plain
    from xlwings import udfs

    assert xlwings.import_udfs is udfs.import_udfs, "the real functions of Windows must be in place"
    udfs.Dispatch = lambda one: one
    return udfs


def vba_modules(workbook):
    """Name and source of every VBA module of a workbook file, as the VBA editor would show it."""
    with zipfile.ZipFile(workbook) as packed:
        data = packed.read("xl/vbaProject.bin")
    found = {}
    for place in re.finditer(b"\x00Attribut", data):
        start = place.start() - 3
        if data[start] == 1:
            text = decompressed(data[start:]).decode("cp1252").replace("\r\n", "\n")
            name = re.match(r'Attribute VB_Name = "(\w+)"', text)[1]
            found[name] = "\n".join(line for line in text.split("\n") if not line.startswith("Attribute "))
    return found


def decompressed(data):
    """A compressed container of MS-OVBA."""
    out, place = bytearray(), 1
    while place + 1 < len(data):
        head = data[place] | data[place + 1] << 8
        place += 2
        if head >> 12 & 7 != 3:
            break
        end, start = place + (head & 0xFFF) + 1, len(out)
        while place < end:
            flags = data[place]
            place += 1
            for bit in range(8):
                if place >= end:
                    break
                if flags >> bit & 1:
                    token = data[place] | data[place + 1] << 8
                    place += 2
                    width = max((len(out) - start - 1).bit_length(), 4)
                    back = (token >> (16 - width)) + 1
                    for _ in range((token & (0xFFFF >> width)) + 3):
                        out.append(out[-back])
                else:
                    out.append(data[place])
                    place += 1
    return bytes(out)


class Code:
    def __init__(self, text):
        self.lines = text.split("\n")

    @property
    def CountOfLines(self):
        return len(self.lines)

    def Lines(self, first, number):
        return "\r\n".join(self.lines[first - 1 : first - 1 + number])

    def DeleteLines(self, first, number):
        del self.lines[first - 1 : first - 1 + number]

    def AddFromString(self, text):
        self.lines = text.split("\r\n") + self.lines


class Component:
    def __init__(self, name, text):
        self.Name, self.CodeModule = name, Code(text)


class Components(dict):
    """VBComponents."""

    def __call__(self, name):
        if name not in self:
            raise ComError(-2147352567, "Exception occurred.", (0, None, "Subscript out of range", None, 0, 0), None)
        return self[name]

    @property
    def Count(self):
        return len(self)

    def Remove(self, component):
        del self[component.Name]

    def Import(self, path):
        text = Path(path).read_text("utf-8")
        name = re.match(r'Attribute VB_Name = "(\w+)"', text)[1]
        assert name not in self, "an imported module of the same name would get another one"
        self[name] = Component(name, text)


class Sheet:
    def __init__(self, excel):
        self.excel, self.Name, self.cells = excel, "_myaddin.conf", {}
        self.Cells = types.SimpleNamespace(ClearContents=self.cells.clear)

    def Range(self, address):
        return self.cells.setdefault(address, Cell(self.excel))


class Cell:
    def __init__(self, excel):
        self.excel, self.Value = excel, None

    @property
    def Formula(self):
        return self._formula

    @Formula.setter
    def Formula(self, text):
        self._formula, self.Value = text, self.excel.calculated(text)


class Sheets(list):
    @property
    def Count(self):
        return len(self)

    def __call__(self, number):
        return self[number - 1]


class Book:
    def __init__(self, excel, path=None):
        self.Application, self.path = excel, path
        self.Name = path.name if path else "Book1"
        self.IsAddin = bool(path)
        self.Worksheets = Sheets([Sheet(excel)])
        self.Title = ""
        modules = vba_modules(path) if path else {}
        self.components = Components({name: Component(name, text) for name, text in modules.items()})
        if path and path.read_bytes().endswith(SAVED):
            self.components = excel.kept

    @property
    def VBProject(self):
        if self.Application.mood == "trust off":
            said = (0, "Excel", "Programmatic access to Visual Basic Project is not trusted", None, 0, -2146827284)
            raise ComError(-2147352567, "Exception occurred.", said, None)
        return types.SimpleNamespace(VBComponents=self.components)

    def Save(self):
        self.Application.saved = {
            "IsAddin": self.IsAddin,
            "title": self.Title,
            "cell": self.Worksheets(1).Range("A1").Value,
            "components": {name: one.CodeModule.lines for name, one in self.components.items()},
        }
        with self.path.open("ab") as file:
            file.write(SAVED)
        self.Application.kept = self.components

    def Close(self, save):
        assert save is False
        self.Application.closed.append(str(self.path))
        self.Application.Workbooks.remove(self)


class Books(Sheets):
    """Workbooks: an open add-in is not counted among them."""

    def __init__(self, excel):
        super().__init__()
        self.excel = excel

    def visible(self):
        return [book for book in self if not book.IsAddin]

    @property
    def Count(self):
        return len(self.visible())

    def __call__(self, number):
        return self.visible()[number - 1]

    def Open(self, path):
        self.append(Book(self.excel, Path(path)))
        return self[-1]

    def Add(self):
        self.append(Book(self.excel))
        return self[-1]


class Excel:
    """Excel.Application. `mood` names what is wrong with it."""

    Hwnd, Version = 1, "16.0"

    def __init__(self, startup, mood=""):
        self.StartupPath, self.mood = str(startup), mood
        self.Workbooks = Books(self)
        self.options, self.closed, self.saved, self.ended = [], [], None, False

    def MacroOptions(self, name, **options):
        if any(book.IsAddin for book in self.Workbooks):
            said = (0, "Excel", "Cannot edit a macro on a hidden workbook.", None, 0, -2146827284)
            raise ComError(-2147352567, "Exception occurred.", said, None)
        self.options.append((name, options))

    def Quit(self):
        assert self.DisplayAlerts is False, "else it would ask whether to save"
        self.ended = True
        self.Workbooks.clear()

    def calculated(self, formula):
        """What a cell would show: the call goes the way that the imported VBA takes, through xlwings' server."""
        if self.mood == "macros off":
            return NAME_ERROR
        if self.mood == "server fails":
            return "Could not load xlwings64-0.0.0.dll from either of the following folders:"
        from xlwings import com_server

        name, given = re.match(r"=(\w+)\((.*)\)$", formula).groups()
        (add_in,) = (book for book in self.Workbooks if book.IsAddin)
        vba = "\n".join(add_in.components("xlwings_udfs").CodeModule.lines)
        module = re.search(rf'{name} = XLPy\.CallUDF\("([\w.]+)", "{name}", Array\(', vba)[1]
        values = tuple(float(word) for word in given.split(",") if word)
        answer = com_server.XLPython().CallUDF(module, name, values, None, MagicMock())
        return answer + 1 if self.mood == "wrong" and isinstance(answer, float) else answer
