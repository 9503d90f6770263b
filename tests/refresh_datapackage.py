"""Recompute rows, bytes and hash of every table listed in data_tables/datapackage.json.

Run `python tests/refresh_datapackage.py` after any change to a table. Everything that a person wrote
(titles, fields, sources, licences, making) is left as it stands. An entry under `planned` moves to
`resources` once its file exists. Refuses, and writes nothing, when a file has no entry or an entry no
file: a table whose origin nobody has stated must not be shipped.
"""

from __future__ import annotations

import csv
import gzip
import hashlib
import io
import json
import sys
from pathlib import Path
from typing import Any

DESCRIPTION = "datapackage.json"


def measure(path: Path) -> dict[str, int | str]:
    """Return rows (without the header), bytes and SHA-256 of one CSV file, gzipped or not."""
    raw = path.read_bytes()
    text = (gzip.decompress(raw) if path.suffix == ".gz" else raw).decode("utf-8")
    return {
        "rows": sum(1 for _ in csv.DictReader(io.StringIO(text, newline=""))),
        "hash": f"sha256:{hashlib.sha256(raw).hexdigest()}",
        "bytes": len(raw),
    }


def take_in_planned(package: dict[str, Any], files: set[str]) -> None:
    """Move the planned entries whose file now exists to the resources, in place."""
    planned = package.pop("planned", [])
    package["resources"] += [entry for entry in planned if entry["path"] in files]
    waiting = [entry for entry in planned if entry["path"] not in files]
    if waiting:
        package["planned"] = waiting


def refresh(folder: Path) -> str:
    """Rewrite the description of the tables in `folder`; return the one line to print.

    Raises
    ------
    ValueError
        If a file has no entry, or an entry has no file.
    """
    description = folder / DESCRIPTION
    package = json.loads(description.read_text(encoding="utf-8"))
    files = {
        path.relative_to(folder).as_posix() for path in folder.rglob("*") if path.is_file() and path != description
    }
    take_in_planned(package, files)
    listed = {resource["path"] for resource in package["resources"]}
    if unlisted := sorted(files - listed):
        raise ValueError(f"no entry in {description} for {', '.join(unlisted)}; write one, or remove the file")
    if missing := sorted(listed - files):
        raise ValueError(f"{description} lists {', '.join(missing)}, which does not exist; remove the entry")
    for resource in package["resources"]:
        resource.update(measure(folder / resource["path"]))
    description.write_text(json.dumps(package, indent=2, ensure_ascii=False) + "\n", encoding="utf-8", newline="\n")
    return f"{len(listed)} tables described in {description}"


def main() -> int:
    """Refresh the folder named on the command line, else data_tables/ of this checkout."""
    default = Path(__file__).resolve().parents[1] / "data_tables"
    folder = Path(sys.argv[1]) if len(sys.argv) > 1 else default
    try:
        print(refresh(folder))
    except ValueError as error:
        print(error, file=sys.stderr)
        return 2
    return 0


if __name__ == "__main__":
    sys.exit(main())
