"""Ways to spoil the bytes of a good file."""

from __future__ import annotations

import gzip
import io
import random
import zipfile

__all__ = ["spoiled"]

_TOKENS = (
    b"",
    b"\x00",
    b"\xff\xfe",
    b"\xef\xbb\xbf",
    b"\r\n",
    b"\r",
    b'"',
    b'"""',
    b",,,,",
    b"\t",
    b";",
    b"nan",
    b"inf",
    b"-inf",
    b"1e308",
    b"-1e309",
    b"1e-320",
    b"99999999999999999999",
    b"-0",
    b"1,5",
    "\u22125".encode(),
    "\u202e\u0645\u0631\u062d\u0628\u0627".encode(),
    b"\xed\xa0\x80",
    b"../../../etc/passwd",
    b"=cmd|' /C calc'!A0",
    b"<script>alert(1)</script>",
    b"<!ENTITY a '&a;&a;'>",
    b"$\\input{/etc/passwd}$",
    b"(" * 500,
    b"[[1, 2, 3]]",
    b"{" * 300,
    b"study,study,x,x",
    b"9" * 5000,
    b"a" * 70_000,
)


def spoiled(content: bytes, chance: random.Random) -> bytes:
    """Return a spoiled copy of a file: of the packed bytes, or of what a zip or gzip file holds.

    Parameters
    ----------
    content : bytes
        A good file.
    chance : random.Random
        Seeded, so that any finding can be made again.

    Returns
    -------
    bytes
        May happen to be good still.
    """
    if chance.random() < 0.6:
        if content[:2] == b"\x1f\x8b":
            return gzip.compress(_bytes(gzip.decompress(content), chance), 1)
        if content[:4] == b"PK\x03\x04":
            return _zip(content, chance)
    return _bytes(content, chance)


def _zip(content: bytes, chance: random.Random) -> bytes:
    """Spoil one member of a zip file, drop it, or put another beside it."""
    with zipfile.ZipFile(io.BytesIO(content)) as archive:
        members = {name: archive.read(name) for name in archive.namelist()}
    name = chance.choice(sorted(members))
    kind = chance.randrange(8)
    if kind == 0:
        del members[name]
    elif kind == 1:
        members["../" * 5 + "outside.xml"] = b"<x/>"
    else:
        members[name] = _bytes(members[name], chance)
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w", zipfile.ZIP_DEFLATED) as archive:
        for member, data in members.items():
            archive.writestr(member, data)
    return packed.getvalue()


def _bytes(content: bytes, chance: random.Random) -> bytes:
    """Spoil bytes one to four times."""
    data = bytearray(content)
    for _ in range(chance.randint(1, 4)):
        at = chance.randrange(len(data) + 1)
        length = min(len(data) - at, int(chance.expovariate(1 / 20)))
        kind = chance.randrange(9)
        if kind == 0:
            data[at : at + length] = b""
        elif kind == 1:
            del data[at:]
        elif kind == 2:
            data[at:at] = chance.choice(_TOKENS)
        elif kind == 3:
            data[at : at + length] = chance.choice(_TOKENS)
        elif kind == 4:
            data[at : at + length] = chance.randbytes(length)
        elif kind == 5 and len(data):
            at = chance.randrange(len(data))
            data[at] ^= 1 << chance.randrange(8)
        elif kind == 6:
            data[at:at] = data[at : at + length] * chance.choice((1, 3, 50))
        elif kind == 7:
            data = _cell(data, chance)
        else:
            lines = bytes(data).split(b"\n")
            chance.shuffle(lines)
            data = bytearray(b"\n".join(lines))
    return bytes(data)


def _cell(data: bytearray, chance: random.Random) -> bytearray:
    """Replace one cell of one line."""
    lines = bytes(data).split(b"\n")
    row = chance.randrange(len(lines))
    cells = lines[row].split(b",")
    cells[chance.randrange(len(cells))] = chance.choice(_TOKENS)
    lines[row] = b",".join(cells)
    return bytearray(b"\n".join(lines))
