"""``netsketch record``: the same numbers as the other commands, in every form."""

from __future__ import annotations

import csv
import hashlib
import re
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

from netsketch.model import LinkState, Plan, edits
from tests.cli.conftest import Run
from tests.demos import demo_path
from tests.published import plan_of
from tests.reports.test_record import HOSTILE, Page

CAMPUS = demo_path("harbour-campus")
TRIED = ("--down", "g3", "--down", "l4", "--cost", "l6=400", "--drain", "Hub-W")


def test_numbers_equal_those_of_the_other_commands(run: Run, tmp_path: Path) -> None:
    out = tmp_path / "r.html"
    assert run("record", CAMPUS, *TRIED, "-o", out, "--no-pictures", "--rows", "9999").code == 0
    page = Page(out.read_text(encoding="utf-8"))
    trial = run("trial", CAMPUS, *TRIED, "--as", "json").json
    figures = next(row for t in page.tables for row in t if "pairs cut off" in "".join(row))
    counts = [int(re.match(r"[\d,]+", cell)[0].replace(",", "")) for cell in figures]  # type: ignore[index]
    assert counts[:4] == [5, trial["cut_off"], trial["moved"], trial["restored"]]
    assert counts[4] == len({pair["from"] for pair in trial["pairs"]})
    rows = page.table("From")
    assert len(rows) == len(trial["pairs"])
    assert sum("cut off" in row[2] for row in rows) == trial["cut_off"]
    extras = [int(row[5].replace("−", "-")) for row in rows if "moved" in row[2]]
    moved = [p["cost"][1] - p["cost"][0] for p in trial["pairs"] if p["outcome"] == "moved"]
    assert extras == sorted(moved, reverse=True)


def test_single_points_equal_the_surveys(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 1, b-c 1, c-d 1, d-a 1"))
    out = file.with_name("r.html")
    assert run("record", file, "--down", "d-a", "-o", out, "--no-pictures").code == 0
    rows = Page(out.read_text(encoding="utf-8")).table("If this fails too")
    found = {row[0].split()[2]: int(row[2]) for row in rows}
    expected = {}
    for kind in ("links", "routers"):
        survey = run("survey", file, "--of", kind, "--down", "d-a", "--as", "json").json
        expected |= {f["failed"][0]: f["cut_off"] for f in survey["failures"] if f["cut_off"]}
    assert found == expected


def test_a_long_ledger_goes_into_a_table_beside(run: Run, tmp_path: Path) -> None:
    out, beside = tmp_path / "change 7.md", tmp_path / "change 7-ledger.csv"
    ended = run("record", CAMPUS, *TRIED, "-o", out, "--rows", "5", "--no-pictures")
    assert ended.out.splitlines() == [str(out), str(beside)]
    with beside.open(encoding="utf-8-sig", newline="") as file:
        rows = list(csv.reader(file))
    expected = run("trial", CAMPUS, *TRIED, "--as", "csv").out
    assert rows == list(csv.reader(expected.splitlines()))
    text = out.read_text(encoding="utf-8")
    assert "change 7-ledger.csv" in text
    assert "The first 5 of" in text


def test_a_short_ledger_needs_no_table_beside(run: Run, saved: Callable[[Plan], Path]) -> None:
    file = saved(plan_of("a-b 5, b-c 5"))
    out = file.with_name("r.md")
    assert run("record", file, "--down", "a-b", "-o", out, "--no-pictures").out == f"{out}\n"
    assert sorted(p.name for p in file.parent.glob("r*")) == ["r.md"]


def test_the_files_checksum_is_in_it(run: Run, tmp_path: Path) -> None:
    out = tmp_path / "r.md"
    assert run("record", CAMPUS, *TRIED, "-o", out, "--no-pictures").code == 0
    text = out.read_text(encoding="utf-8")
    assert hashlib.sha256(CAMPUS.read_bytes()).hexdigest() in text
    assert "edited since" not in text


def test_the_stored_trial_counts_only_when_asked_for(
    run: Run, saved: Callable[[Plan], Path]
) -> None:
    plan = plan_of("a-b 5, b-c 5")
    plan.apply(edits.try_changes(plan, [LinkState("a-b")], "try"))
    file = saved(plan)
    out = file.with_name("r.md")
    refusal = run("record", file, "-o", out).refusal
    assert refusal == (
        f"netsketch: {file}: there is no change to record: give --down, --drain, --cost or --trial"
    )
    assert run("record", file, "--trial", "-o", out, "--no-pictures").code == 0
    assert "Take link a-b" in out.read_text(encoding="utf-8")


def test_what_is_refused(run: Run, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    out = tmp_path / "r.doc"
    assert run("record", CAMPUS, *TRIED, "-o", out).refusal == (
        f"netsketch: {out}: a record is one of .html, .pdf, .md"
    )
    nowhere = tmp_path / "none" / "r.html"
    assert str(nowhere) in run("record", CAMPUS, *TRIED, "-o", nowhere, "--no-pictures").refusal
    page = tmp_path / "r.html"
    assert "Nowhere" in run("record", CAMPUS, *TRIED, "-o", page, "--from", "Nowhere").refusal
    for rows in ("-1", "many", "9" * 5000):
        assert run("record", CAMPUS, *TRIED, "-o", page, "--rows", rows).code == 2
    assert list(tmp_path.iterdir()) == []


def test_hostile_names_pass_through_every_form(run: Run, saved: Callable[[Plan], Path]) -> None:
    plan = plan_of("a-b 5, b-c 5")
    for router, name in zip("abc", HOSTILE[:3], strict=True):
        plan.apply(edits.rename(plan, router, name))
    file = saved(plan)
    for suffix in (".html", ".md"):
        out = file.with_name(f"r{suffix}")
        assert run("record", file, "--down", "b", "-o", out, "--no-pictures").code == 0
        assert not re.search(r"(?<!\\)<script", out.read_text(encoding="utf-8"))


@pytest.mark.gui
def test_pictures_of_the_router_asked_for(run: Run, tmp_path: Path) -> None:
    out = tmp_path / "r.html"
    assert run("record", CAMPUS, *TRIED, "-o", out, "--from", "Ferry-1").code == 0
    text = out.read_text(encoding="utf-8")
    assert text.count("<svg ") == 2
    assert "Routes from Ferry-1" in text
    assert "Effect of the trial on Ferry-1" in text
    assert Page(text).elements
    note = tmp_path / "r.md"
    written = run("record", CAMPUS, *TRIED, "-o", note).out.splitlines()
    assert [Path(p).name for p in written] == [
        "r.md",
        "r-ledger.csv",
        "r-before.svg",
        "r-after.svg",
    ]
    assert all(Path(p).stat().st_size for p in written)


@pytest.mark.gui
def test_pdf_has_pages_and_drawings(run: Run, tmp_path: Path) -> None:
    sizes = {}
    for words in ((), ("--no-pictures",)):
        out = tmp_path / "r.pdf"
        assert run("record", CAMPUS, *TRIED, "-o", out, *words).code == 0
        data = out.read_bytes()
        assert data.startswith(b"%PDF")
        sizes[words] = len(re.findall(rb"/Type\s*/Page\b", data)), len(data)
    (pages, long), (fewer, short) = sizes.values()
    assert pages > fewer >= 2
    assert long > short + 20_000, "the drawings take room"


def test_no_pictures_needs_no_qt(run: Run, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A module that is ``None`` in ``sys.modules`` cannot be imported."""
    for name in [key for key in sys.modules if key.startswith("netsketch.sheet")]:
        monkeypatch.delitem(sys.modules, name)
    for name in ("PySide6", "PySide6.QtGui", "netsketch.sheet"):
        monkeypatch.setitem(sys.modules, name, None)
    for suffix in (".html", ".md"):
        out = tmp_path / f"r{suffix}"
        assert run("record", CAMPUS, *TRIED, "-o", out, "--no-pictures").code == 0
