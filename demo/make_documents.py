"""Write the invented manuscript as a Word document and as a PDF, from manuscript.md.

EVERYTHING IN THEM IS INVENTED. Run `python make_documents.py` after make_demo.py, or
`python make_documents.py FOLDER`. Needs python-docx and fpdf2.
"""

from __future__ import annotations

import io
import re
import sys
import zipfile
from datetime import UTC, datetime
from pathlib import Path

import docx
from fpdf import FPDF

WHEN = datetime(2026, 1, 1, tzinfo=UTC)
"""A fixed clock, so that every run writes the same bytes."""


def main(folder: Path) -> None:
    """Write both files beside the Markdown."""
    parts = parsed((folder / "manuscript.md").read_text(encoding="utf-8"))
    (folder / "manuscript.docx").write_bytes(word(parts))
    (folder / "manuscript.pdf").write_bytes(portable(parts))


def parsed(text: str) -> list[tuple[str, object]]:
    """Return headings, paragraphs and tables in their order."""
    parts: list[tuple[str, object]] = []
    for block in re.split(r"\n\s*\n", text.strip()):
        lines = block.split("\n")
        if block.startswith("#"):
            parts.append(("title" if block.startswith("# ") else "heading", block.lstrip("# ")))
        elif block.startswith("|"):
            rows = [[cell.strip() for cell in line.strip("|").split("|")] for line in lines]
            parts.append(("table", [row for row in rows if not set(row[0]) <= {"-", ":"}]))
        else:
            parts.append(("prose", " ".join(lines).replace("**", "").replace("`", "")))
    return parts


def word(parts: list[tuple[str, object]]) -> bytes:
    """Return a Word document."""
    document = docx.Document()
    document.core_properties.created = document.core_properties.modified = WHEN.replace(tzinfo=None)
    document.core_properties.author = "invented"
    document.core_properties.comments = "INVENTED for demonstration"
    for kind, content in parts:
        if kind == "title":
            document.add_heading(str(content), 0)
        elif kind == "heading":
            document.add_heading(str(content), 1)
        elif kind == "prose":
            document.add_paragraph(str(content))
        elif isinstance(content, list):
            table = document.add_table(rows=0, cols=len(content[0]))
            for row in content:
                for cell, text in zip(table.add_row().cells, row, strict=True):
                    cell.text = text
    made, fixed = io.BytesIO(), io.BytesIO()
    document.save(made)
    with zipfile.ZipFile(made) as source, zipfile.ZipFile(fixed, "w", zipfile.ZIP_DEFLATED) as target:
        for name in source.namelist():
            target.writestr(zipfile.ZipInfo(name, (2026, 1, 1, 0, 0, 0)), source.read(name), zipfile.ZIP_DEFLATED)
    return fixed.getvalue()


def portable(parts: list[tuple[str, object]]) -> bytes:
    """Return a PDF of narrow pages with a running head, as journals have them."""

    class Paper(FPDF):
        def header(self) -> None:
            self.set_font("Times", "I", 8)
            self.cell(0, 5, "INVENTED: what goes on in viewers", align="C", new_x="LMARGIN", new_y="NEXT")
            self.ln(2)

        def footer(self) -> None:
            self.set_y(-12)
            self.set_font("Times", "", 8)
            self.cell(0, 5, str(self.page_no()), align="C")

    paper = Paper(format=(150, 200))
    paper.set_creation_date(WHEN)
    paper.set_title("INVENTED manuscript of the demonstration")
    paper.set_producer("invented")
    paper.set_auto_page_break(auto=True, margin=15)
    paper.add_page()
    for kind, content in parts:
        if kind == "table" and isinstance(content, list):
            paper.set_font("Times", "", 9)
            for row in content:
                for width, text in zip((55, 15, 15, 15, 20), row, strict=True):
                    paper.cell(width, 5, text)
                paper.ln(5)
            paper.ln(3)
            continue
        paper.set_font("Times", "B" if kind in ("title", "heading") else "", 13 if kind == "title" else 10)
        paper.multi_cell(0, 5, str(content), align="L" if kind != "prose" else "J", new_x="LMARGIN", new_y="NEXT")
        paper.ln(3)
    return bytes(paper.output())


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent)
