"""Messages over a pipe: four bytes of length, then JSON. Used on both sides, so in the syntax of Python 3.8.

JSON writes a float with the digits that read back as the same float, and can carry nothing that runs.
"""

import json
import os
import select
import time

CHUNK = 1 << 16
MOMENT = 0.0002  # s that a side stays awake for the other
LONGEST = 1 << 30
encode = json.JSONEncoder(separators=(",", ":"), check_circular=False).encode
_decode = json.JSONDecoder().raw_decode


class Closed(Exception):
    """The other side is gone."""


def decode(data: bytes) -> object:
    """The message in these bytes."""
    return _decode(str(data, "ascii"))[0]


def send(descriptor: int, message: object) -> None:
    """Write one message."""
    data = encode(message).encode("ascii")
    data = len(data).to_bytes(4, "big") + data
    sent = os.write(descriptor, data)
    while sent < len(data):
        sent += os.write(descriptor, data[sent : sent + CHUNK])


def look_out(descriptor: int, seconds: float) -> None:
    """Wait awake for the next message for a moment: to be woken costs more than most calls take."""
    if os.name != "posix":
        return
    end = time.monotonic() + seconds
    while not select.select((descriptor,), (), (), 0.0)[0]:
        if time.monotonic() > end:
            return


def receive(descriptor: int) -> object:
    """Read one message; the other side sends no second one before it is answered."""
    data = os.read(descriptor, CHUNK)
    wanted = 4
    if len(data) >= 4:
        wanted += int.from_bytes(data[:4], "big")
    if len(data) == wanted > 4:
        return decode(data[4:])
    return _receive_long(descriptor, data)


def _receive_long(descriptor: int, data: bytes) -> object:
    parts, have = [data], len(data)
    wanted = None
    while True:
        if wanted is None and have >= 4:
            head = b"".join(parts)
            wanted = 4 + int.from_bytes(head[:4], "big")
            if wanted > LONGEST:
                raise Closed("not a message")
        if wanted is not None and have >= wanted:
            return decode(b"".join(parts)[4:wanted])
        part = os.read(descriptor, CHUNK if wanted is None else min(1 << 20, wanted - have))
        if not part:
            raise Closed("the other side is gone")
        parts.append(part)
        have += len(part)
