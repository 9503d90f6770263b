"""No socket, no text left behind, the same bytes every time; one line when disk, memory or user say no."""

from __future__ import annotations

import gzip
import os
import resource
import signal
import subprocess
import sys
import time
import zipfile
from collections.abc import Callable
from pathlib import Path

import pytest

from revinf.knowledge import demo_folder

SECRET = "xylophonist"
"""Stands in the manuscript of these tests and in no other file."""


def environment(**more: str) -> dict[str, str]:
    kept = {name: value for name, value in os.environ.items() if name != "REVINF_LITERATURE"}
    root = str(Path(__file__).resolve().parents[2])
    return kept | {"PYTHONPATH": root, "PYTHONIOENCODING": "utf-8"} | more


def revinf(*words: object, limits: Callable[[], None] | None = None, **more: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "revinf", *map(str, words)],
        env=environment(**more),
        capture_output=True,
        encoding="utf-8",
        check=False,
        timeout=200,
        preexec_fn=limits,
    )


def commands(lit: Path, out: Path) -> dict[str, tuple[object, ...]]:
    """Return a call of every command that reads or writes files."""
    demo = demo_folder()
    here = ("--peak", -22, -4, -18, "--term", "fear")
    build = ("--peaks", demo / "peaks.csv", "--annotations", demo / "annotations.csv", "--invented")
    literature = ("--literature", lit)
    return {
        "build": ("build", *build, "--out", out / "lit"),
        "inspect": ("inspect", lit, "--verify"),
        "terms": ("terms", "fear", *literature),
        "check": ("check", *literature, *here, "--report", out / "check.html"),
        "profile": ("profile", *literature, "--peak", -22, -4, -18),
        "tabulate": ("tabulate", *literature, "--lattice", 24, "--radius", 10, "--out", out / "table.csv"),
        "audit": ("audit", demo / "claims.csv", *literature, "--out", out / "report", "--for", "author"),
        "scan": ("scan", out / "secret.md", "--out", out / "claims.csv", "--coordinates", out / "found.csv"),
        "settle": ("settle", *literature, *here),
        "calibrate": ("calibrate", *literature, "--out", out / "cal", "--folds", 3, "--no-keep", "--jobs", 2),
        "map": ("map", "--term", "fear", *literature, "--out", out / "map"),
        "map of all": ("map", "--all-terms", "--hits-only", *literature, "--out", out / "hits"),
        "compare": ("compare", lit, lit, "--claims", demo / "claims.csv"),
        "demo": ("demo", "--out", out / "demo"),
    }


NAMES = list(commands(Path(), Path()))


def write_secret(folder: Path) -> None:
    (folder / "secret.md").write_text(
        f"# Results\n\nThe left amygdala (-22, -4, -18) of the {SECRET} was active.\n\n"
        f"# Discussion\n\nThis activity suggests that the {SECRET} felt fear.\n",
        encoding="utf-8",
    )


FORBIDDING = """
import socket, sys
def refuse(event, args):
    if event.startswith("socket.") and event not in ("socket.gethostname",):
        sys.stderr.write("SOCKET %s %r\\n" % (event, args))
        raise OSError("sockets are forbidden here")
sys.addaudithook(refuse)
"""


@pytest.mark.parametrize("name", NAMES)
def test_no_socket_is_opened_and_nothing_stays_in_temporary_folders(
    name: str, literature: Path, tmp_path: Path
) -> None:
    for folder in ("site", "temporary", "out", "home"):
        (tmp_path / folder).mkdir()
    (tmp_path / "site" / "sitecustomize.py").write_text(FORBIDDING, encoding="utf-8")
    write_secret(tmp_path / "out")
    path = os.pathsep.join([str(tmp_path / "site"), str(Path(__file__).resolve().parents[2])])
    home, temporary = str(tmp_path / "home"), str(tmp_path / "temporary")
    places = {"HOME": home, "MPLCONFIGDIR": home, "TMPDIR": temporary, "JOBLIB_TEMP_FOLDER": temporary}
    done = revinf(*commands(literature, tmp_path / "out")[name], PYTHONPATH=path, **places)
    assert (done.returncode, done.stderr) == (0, "")
    assert list((tmp_path / "temporary").iterdir()) == []
    kept = [file for file in (tmp_path / "home").rglob("*") if file.is_file()]
    assert [file.name for file in kept if SECRET.encode() in file.read_bytes()] == []


@pytest.mark.parametrize("name", ["build", "audit", "scan", "map", "map of all"])
def test_outputs_are_the_same_bytes_whatever_the_hash_seed(name: str, literature: Path, tmp_path: Path) -> None:
    contents = []
    for seed in ("0", "4242"):
        out = tmp_path / "out"  # the same words, since a report tells the command
        out.mkdir()
        write_secret(out)
        done = revinf(*commands(literature, out)[name], PYTHONHASHSEED=seed)
        assert done.returncode == 0, done.stderr
        contents.append({str(f.relative_to(out)): f.read_bytes() for f in sorted(out.rglob("*")) if f.is_file()})
        out.rename(tmp_path / f"out-{seed}")
    assert contents[0] == contents[1]


def test_calibration_is_the_same_bytes_whatever_the_number_of_processes(literature: Path, tmp_path: Path) -> None:
    contents = []
    for jobs in (1, 2):
        words = ("calibrate", "--literature", literature, "--folds", 3, "--no-keep", "--jobs", jobs, "--json")
        done = revinf(*words, "--out", tmp_path / str(jobs))
        assert done.returncode == 0, done.stderr
        contents.append(done.stdout)
    assert contents[0] == contents[1]


@pytest.mark.parametrize("name", ["build", "audit", "calibrate", "map", "map of all"])
@pytest.mark.parametrize("after", [0.4, 1.1, 1.6])
def test_an_interrupt_is_one_line_and_leaves_nothing(name: str, after: float, literature: Path, tmp_path: Path) -> None:
    child = subprocess.Popen(
        [sys.executable, "-m", "revinf", *map(str, commands(literature, tmp_path)[name])],
        env=environment(),
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        encoding="utf-8",
        start_new_session=True,
    )
    time.sleep(after)
    os.killpg(child.pid, signal.SIGINT)  # as a terminal does: to the command and to all that it started
    _, stderr = child.communicate(timeout=60)
    if child.returncode == 0:
        return  # it was quicker
    if child.returncode == -signal.SIGINT:
        assert "one_line.py" not in stderr  # Python itself was still starting, or closing down
        return
    assert child.returncode == 130, stderr
    assert stderr == "revinf: interrupted; nothing was left half-written\n"
    assert [path.name for path in tmp_path.iterdir()] == []


@pytest.mark.parametrize("name", ["build", "audit", "map", "map of all", "tabulate"])
def test_a_full_disk_is_one_line_and_the_old_result_stays(name: str, literature: Path, tmp_path: Path) -> None:
    words = commands(literature, tmp_path)[name]
    assert revinf(*words).returncode == 0
    before = {f: f.read_bytes() for f in sorted(tmp_path.rglob("*")) if f.is_file()}

    def small_files() -> None:
        resource.setrlimit(resource.RLIMIT_FSIZE, (2_000, 2_000))
        signal.signal(signal.SIGXFSZ, signal.SIG_IGN)

    done = revinf(*words, limits=small_files)
    assert done.returncode == 2, done.stderr
    assert done.stderr.count("\n") == 1
    assert "Traceback" not in done.stderr
    assert {f: f.read_bytes() for f in sorted(tmp_path.rglob("*")) if f.is_file()} == before


@pytest.mark.skipif(os.geteuid() == 0, reason="the superuser may write anywhere")
@pytest.mark.parametrize("name", ["build", "audit", "scan", "map"])
def test_a_folder_that_may_not_be_written_is_one_line(name: str, literature: Path, tmp_path: Path) -> None:
    write_secret(tmp_path)
    tmp_path.chmod(0o500)
    done = revinf(*commands(literature, tmp_path)[name])
    tmp_path.chmod(0o700)
    assert (done.returncode, done.stderr.count("\n")) == (2, 1)


def test_two_builds_at_once_leave_one_whole_literature(tmp_path: Path) -> None:
    words = [sys.executable, "-m", "revinf", *map(str, commands(tmp_path, tmp_path)["build"])]
    pipes = {"env": environment(), "stdout": subprocess.PIPE, "stderr": subprocess.PIPE, "encoding": "utf-8"}
    both = [subprocess.Popen(words, **pipes) for _ in range(2)]  # type: ignore[call-overload]
    for child in both:
        _, stderr = child.communicate(timeout=100)
        assert child.returncode in (0, 2)
        assert child.returncode == 0 or stderr.count("\n") == 1, stderr
    assert revinf("inspect", tmp_path / "lit", "--verify").returncode == 0
    assert [path.name for path in tmp_path.iterdir()] == ["lit"]


def two_gigabytes() -> None:
    resource.setrlimit(resource.RLIMIT_AS, (2 << 30, 2 << 30))


ENTITIES = "<!DOCTYPE x [<!ENTITY a 'aaaaaaaaaa'>" + "".join(
    f"<!ENTITY {chr(98 + n)} '{f'&{chr(97 + n)};' * 10}'>" for n in range(12)
)


def document(path: Path, xml: str) -> None:
    """Write a Word file with some text as its main part."""
    with (
        zipfile.ZipFile(demo_folder() / "manuscript.docx") as good,
        zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as bad,
    ):
        for name in good.namelist():
            bad.writestr(name, xml if name == "word/document.xml" else good.read(name))


def bomb(name: str, folder: Path) -> tuple[object, ...]:
    """Write a file that is far larger than it looks, and return the words that read it."""
    demo, out = demo_folder(), folder / "out"
    peaks, terms = folder / "peaks.csv", demo / "annotations.csv"
    build = ("build", "--peaks", peaks, "--annotations", terms, "--invented", "--out", out)
    if name == "ten million columns":
        peaks.write_text("study,x,y,z" + ",c" * 10_000_000 + "\n", encoding="utf-8")
    elif name == "a cell of 100 MB":
        peaks.write_text("study,x,y,z\na,1,2,3\n" + "b" * 100_000_000 + ",1,2,3\n", encoding="utf-8")
    elif name == "an open quote":
        peaks.write_text('study,x,y,z\na,1,2,3\n"' + "b,1,2,3\n" * 3_000_000, encoding="utf-8")
    elif name == "a packed gigabyte":
        with gzip.open(peaks, "wb", 9) as stream:
            stream.write(b"study,x,y,z\n")
            for _ in range(100):
                stream.write(bytes(10_000_000))
    elif name == "claims of 100 MB":
        (folder / "claims.csv").write_text("claim,term,x,y,z\nc1," + "f" * 100_000_000 + ",1,2,3\n", encoding="utf-8")
        return ("audit", folder / "claims.csv", "--out", out)
    elif name == "a packed map":
        with gzip.open(folder / "map.nii.gz", "wb", 9) as stream:
            for _ in range(100):
                stream.write(bytes(10_000_000))
        return ("peaks", folder / "map.nii.gz", "--threshold", 3, "--out", out)
    elif name == "entities in a page":
        (folder / "m.html").write_text(f"{ENTITIES}]><html><body><p>&l; amygdala</p></body></html>", encoding="utf-8")
        return ("scan", folder / "m.html", "--out", out)
    elif name == "entities in a document":
        space = "http://schemas.openxmlformats.org/wordprocessingml/2006/main"
        body = f"<w:document xmlns:w='{space}'><w:body><w:p><w:r><w:t>&l;</w:t></w:r></w:p></w:body></w:document>"
        document(folder / "m.docx", f"{ENTITIES}]>{body}")
        return ("scan", folder / "m.docx", "--out", out)
    elif name == "a packed document":
        document(folder / "m.docx", "<!-- " + " " * 900_000_000 + " -->")
        return ("scan", folder / "m.docx", "--out", out)
    elif name == "an endless word":
        (folder / "m.txt").write_text("The amygdala suggests " + "fear" * 5_000_000 + ".", encoding="utf-8")
        return ("scan", folder / "m.txt", "--out", out)
    elif name == "a deep list":
        (folder / "t.toml").write_text("thin_weigh = " + "[" * 100_000, encoding="utf-8")
        return ("check", "--peak", 1, 2, 3, "--term", "navigation", "--thresholds", folder / "t.toml")
    return build


@pytest.mark.parametrize(
    "name",
    [
        "ten million columns", "a cell of 100 MB", "an open quote", "a packed gigabyte", "claims of 100 MB",
        "a packed map", "entities in a page", "entities in a document", "a packed document", "an endless word",
        "a deep list",
    ],
)  # fmt: skip
def test_a_bomb_is_read_or_refused_in_little_memory_and_time(name: str, tmp_path: Path) -> None:
    words = bomb(name, tmp_path)
    start = time.perf_counter()
    # Every thread of the linear algebra reserves address space; what is measured here is the reading.
    done = revinf(*words, limits=two_gigabytes, OPENBLAS_NUM_THREADS="2", OMP_NUM_THREADS="2")
    assert time.perf_counter() - start < 60
    assert done.returncode in (0, 2), done.stderr
    assert "Traceback" not in done.stderr
    assert done.returncode == 0 or done.stderr.count("\n") == 1, done.stderr
    assert not any(path.name.startswith(".") for path in tmp_path.iterdir())
