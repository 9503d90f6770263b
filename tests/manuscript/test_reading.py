"""Every kind of file reads as the same text, in order, with sections, places, and without what is not prose."""

from __future__ import annotations

import zipfile
from pathlib import Path

import pytest

from revinf.exceptions import InputFileError
from revinf.knowledge import demo_folder
from revinf.manuscript.document import Document
from revinf.manuscript.reading import read_document

LETTERS = "abcdefghijklmnopqrstuvwxyz"
PARAGRAPH = "The left amygdala (x = −22, y = −4, z = −18) was active. This suggests fear."


def written(folder: Path, name: str, text: str) -> Path:
    path = folder / name
    path.write_text(text, encoding="utf-8")
    return path


def sections(document: Document) -> list[tuple[str, str, str]]:
    return [(block.kind, block.section, block.text) for block in document.blocks]


EXPECTED = [
    ("heading", "title", "On fear"),
    ("heading", "results", "Results"),
    ("prose", "results", PARAGRAPH),
    ("row", "results", "left amygdala −22 −4 −18"),
    ("heading", "discussion", "Discussion"),
    ("prose", "discussion", "It holds."),
]
MARKDOWN = f"""# On fear

## Results

{PARAGRAPH}

| region | x | y | z |
|---|---|---|---|
| left amygdala | −22 | −4 | −18 |

## Discussion

It *holds*.

## References

1. Invented, A. The insula suggests disgust.
"""
HTML = f"""<html><head><title>no</title><script>alert("The insula suggests disgust.")</script></head><body>
<nav>Home</nav><h1>On fear</h1><h2>Results</h2><p>{PARAGRAPH}</p>
<table><tr><th>region</th><th>x</th><th>y</th><th>z</th></tr>
<tr><td>left amygdala</td><td>−22</td><td>−4</td><td>−18</td></tr></table>
<h2>Discussion</h2><p>It <em>holds</em>.</p><h2>References</h2><p>The insula suggests disgust.</p></body></html>"""
TEX = r"""\documentclass{article}
\title{On fear}
\begin{document}
\maketitle
\section{Results}
The left amygdala ($x = -22$, $y = -4$, $z = -18$) was active~\cite{a}. % The insula suggests disgust.
This suggests fear.

\begin{tabular}{lrrr}
region & x & y & z \\ \hline
left amygdala & $-22$ & $-4$ & $-18$ \\
\end{tabular}

\section*{Discussion}
It \emph{holds}.
\begin{thebibliography}{9}
\bibitem{a} The insula suggests disgust.
\end{thebibliography}
\end{document}
"""


def test_markdown_reads_in_order_and_drops_the_references(tmp_path: Path) -> None:
    assert sections(read_document(written(tmp_path, "a.md", MARKDOWN))) == EXPECTED


def test_html_reads_as_markdown_does(tmp_path: Path) -> None:
    assert sections(read_document(written(tmp_path, "a.html", HTML))) == EXPECTED


def test_tex_reads_as_markdown_does(tmp_path: Path) -> None:
    plain = [(kind, section, text.replace("−", "-")) for kind, section, text in EXPECTED]
    found = sections(read_document(written(tmp_path, "a.tex", TEX)))
    assert [(kind, section, text.replace("−", "-")) for kind, section, text in found] == plain


def test_plain_text_knows_sections_tables_and_lines(tmp_path: Path) -> None:
    text = (
        "On fear\n\nRESULTS\nThe left amyg-\ndala was active.\n\nregion  x  y  z\nleft amygdala  -22 -4 -18\n\n"
        "References\nThe insula.\n"
    )
    document = read_document(written(tmp_path, "a.txt", text))
    assert [(b.kind, b.section, b.text) for b in document.blocks] == [
        ("prose", "title", "On fear"),
        ("heading", "results", "RESULTS"),
        ("prose", "results", "The left amygdala was active."),
        ("row", "results", "left amygdala  -22 -4 -18"),
    ]
    assert document.blocks[2].where(0) == "line 4"
    assert document.blocks[2].where(14) == "line 5"


@pytest.mark.parametrize("ending", ["docx", "pdf"])
def test_the_demos_copies_read_as_its_markdown(ending: str) -> None:
    def words(name: str) -> str:
        blocks = read_document(demo_folder() / name).blocks
        return " ".join(" ".join(block.text for block in blocks if block.kind != "row").split())

    assert words(f"manuscript.{ending}").replace("-", "") == words("manuscript.md").replace("-", "")
    rows = [
        block.cells for block in read_document(demo_folder() / f"manuscript.{ending}").blocks if block.kind == "row"
    ]
    assert len(rows) == 12
    assert rows[-1] == ("left hand area", "-37", "-24", "51", "TAL")


def test_running_heads_page_numbers_and_margin_numbers_fall_away(tmp_path: Path) -> None:
    from fpdf import FPDF

    paper = FPDF()
    for page in range(1, 5):
        paper.add_page()
        paper.set_font("Times", "", 11)
        lines = [
            f"{25 * (page - 1) + number} Sentence {LETTERS[number] * page} stands here." for number in range(1, 25)
        ]
        for line in ["INVENTED running head", *lines, f"Page {page} of 4"]:
            paper.cell(0, 6, line, new_x="LMARGIN", new_y="NEXT")
    path = tmp_path / "a.pdf"
    path.write_bytes(bytes(paper.output()))
    text = " ".join(block.text for block in read_document(path).blocks)
    assert text.startswith("Sentence b stands here. Sentence c stands here.")
    assert "running head" not in text
    assert "Page 2 of 4" not in text
    assert text.count("Sentence") == 96


def test_a_paragraph_may_run_over_two_pages(tmp_path: Path) -> None:
    from fpdf import FPDF

    paper = FPDF()
    for line in ("The left amygdala was", "active during storms."):
        paper.add_page()
        paper.set_font("Times", "", 11)
        paper.cell(0, 6, line)
    path = tmp_path / "a.pdf"
    path.write_bytes(bytes(paper.output()))
    (block,) = read_document(path).blocks
    assert block.text == "The left amygdala was active during storms."
    assert (block.where(0), block.where(25)) == ("page 1", "page 2")


def refusal(path: Path) -> str:
    with pytest.raises(InputFileError) as caught:
        read_document(path)
    message = str(caught.value)
    assert "\n" not in message
    return message


def test_unreadable_files_get_one_line(tmp_path: Path) -> None:
    for name in ("a.pdf", "a.docx"):
        (tmp_path / name).write_bytes(b"%PDF-1.4 broken \x00\x01" * 20)
        assert "is not a readable" in refusal(tmp_path / name)
        (tmp_path / name).write_bytes(b"")
        refusal(tmp_path / name)
    (tmp_path / "a.txt").write_bytes(b"a\0b")
    assert "NUL" in refusal(tmp_path / "a.txt")
    assert "holds no text" in refusal(written(tmp_path, "b.txt", " \n 12 \n"))
    assert "ends in" in refusal(written(tmp_path, "a.rtf", "x"))
    assert "cannot be read" in refusal(tmp_path / "missing.txt")
    (tmp_path / "folder.txt").mkdir()
    assert "is not a file" in refusal(tmp_path / "folder.txt")


def test_a_pdf_with_a_password_and_a_scan_get_their_own_line(tmp_path: Path) -> None:
    from fpdf import FPDF

    locked = FPDF()
    locked.add_page()
    locked.set_font("Times", "", 11)
    locked.cell(0, 6, "secret")
    locked.set_encryption(owner_password="a", user_password="b")
    (tmp_path / "locked.pdf").write_bytes(bytes(locked.output()))
    assert "needs a password" in refusal(tmp_path / "locked.pdf")
    picture = FPDF()
    picture.add_page()
    picture.rect(10, 10, 50, 50)
    (tmp_path / "scan.pdf").write_bytes(bytes(picture.output()))
    assert "needs text recognition" in refusal(tmp_path / "scan.pdf")


def test_a_word_document_that_unpacks_to_a_flood_is_refused(tmp_path: Path) -> None:
    with zipfile.ZipFile(tmp_path / "bomb.docx", "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("word/document.xml", b"0" * 150_000_000)
    assert "which no manuscript needs" in refusal(tmp_path / "bomb.docx")


def test_a_missing_reader_is_named_with_what_to_install(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    import sys

    monkeypatch.setitem(sys.modules, "pypdfium2", None)
    (tmp_path / "a.pdf").write_bytes(b"%PDF-1.4")
    assert "pip install 'revinf[documents]'" in refusal(tmp_path / "a.pdf")
