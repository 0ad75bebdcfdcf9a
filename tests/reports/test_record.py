"""The record's numbers, words and three forms, on small networks and the demo campus."""

from __future__ import annotations

import csv
import io
import re
from html.parser import HTMLParser

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from netsketch.analysis import failures_of, survey
from netsketch.model import (
    AddedLink,
    Demand,
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Plan,
    TrialChange,
    edits,
)
from netsketch.reports import cautions
from netsketch.reports.ledger import LEDGER_COLUMNS, ledger_cells
from netsketch.reports.record import Origin, Picture, Record, gather, ledger_csv
from netsketch.reports.record_html import html, inline_svg, print_html
from netsketch.reports.record_markdown import markdown
from netsketch.reports.record_numbers import most_changed
from netsketch.reports.record_words import LONGEST, shown
from netsketch.routing import never
from netsketch.session.answers import Answers
from netsketch.session.document import Document
from tests import strategies
from tests.demos import demo
from tests.published import plan_of

ORIGIN = Origin("campus.netsketch.json", "ab" * 32, True, "1.2.3", "2031-04-05 06:07 UTC")
SVG = '<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg"><title>t</title></svg>\n'
HOSTILE = (
    "<script>alert(1)</script>",
    "=cmd('calc')!A0",
    "x" * 10_000,
    "מִגְדָּל ימין",
    "👷🏽‍♀️🛠️",
    "`rm` ```",
    "a | b || c",
    "two\nlines\r\nand\ttabs",
    "\u202eright\u202c to left",
    '"><img src=x onerror=alert(1)>',
    "[click](http://example.invalid) www.example.invalid",
    "{{ 7 * 7 }}{% raw %}",
    "**bold** _it_ #h",
)


def recorded(plan: Plan, *changes: TrialChange, rows: int = 200) -> Record:
    plan.apply(edits.try_changes(plan, changes, "try"))
    answers = Answers(Document(plan))
    ledger = answers.ledger_task()(never)
    networks = answers.network, answers.in_trial
    return gather(plan, networks, ledger, ORIGIN, rows=rows, ledger_file="r-ledger.csv")


class Page(HTMLParser):
    """Reads a page; keeps every element with its attributes, and checks that all close."""

    VOID = frozenset({"meta", "img", "br", "path", "rect"})

    def __init__(self, text: str) -> None:
        super().__init__(convert_charrefs=True)
        self.elements: list[tuple[str, dict[str, str | None]]] = []
        self.open: list[str] = []
        self.tables: list[list[list[str]]] = []
        self.feed(text)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.elements.append((tag, dict(attrs)))
        if tag not in self.VOID:
            self.open.append(tag)
        if tag == "table":
            self.tables.append([])
        if tag == "tr":
            self.tables[-1].append([])
        if tag in ("td", "th"):
            self.tables[-1][-1].append("")

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.elements.append((tag, dict(attrs)))

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        if any(tag in ("td", "th") for tag in self.open):
            self.tables[-1][-1][-1] += data

    def table(self, first: str) -> list[list[str]]:
        """The rows below the head of the first table that begins with ``first``."""
        return next(t[1:] for t in self.tables if t and t[0] and t[0][0] == first)


SQUARE = "a-b 5, a-c 5, b-d 5, c-d 10"


def test_steps_in_order_and_the_way_back_reversed() -> None:
    plan = plan_of(SQUARE + ", a-s 5", "s")
    record = recorded(
        plan,
        LinkCost("a-b", 7, 7),
        Drained("c"),
        LinkState("b-d"),
        NodeState("s"),
        LinkCost("a-s", 9, 0),
        LinkCost("c-d", 10, 12),
    )
    assert [(s.action, s.was, s.becomes) for s in record.steps] == [
        ("Set the cost of link a-b (a – b)", "5", "7"),
        ("Drain router c", "in service", "drained"),
        ("Take link b-d (b – d) down", "up", "down"),
        ("Take segment s down", "up", "down"),
        ("Set the cost of link a-s (a – s)", "5", "9"),
        ("Set the cost of link c-d (c – d)", "10 leaving d", "12 leaving d"),
    ]
    assert [(s.action, s.was, s.becomes) for s in record.way_back] == [
        ("Set back the cost of link c-d (c – d)", "12 leaving d", "10 leaving d"),
        ("Set back the cost of link a-s (a – s)", "9", "5"),
        ("Bring segment s up", "down", "up"),
        ("Bring link b-d (b – d) up", "down", "up"),
        ("Return router c to service", "drained", "in service"),
        ("Set back the cost of link a-b (a – b)", "7", "5"),
    ]


def test_a_link_that_only_the_trial_has_is_a_step_and_can_fail() -> None:
    """a and b are joined by the trial alone, so the new link is a new single point."""
    record = recorded(plan_of("a-c 5, b-d 5"), AddedLink("new", "a", "b", 3, 4))
    assert "new" in record.steps[0].action
    assert record.way_back[0].was == record.steps[0].becomes
    assert record.restored == 8
    points = {(p.kind, p.id): (p.cut_off_before, p.cut_off_after) for p in record.single_points}
    assert points["link", "new"] == (0, 8)


def test_ledger_is_cut_worst_first() -> None:
    """With b-d down d is 5 further from a and 15 further from b; e is cut off from all."""
    record = recorded(plan_of(SQUARE + ", d-e 1"), LinkState("b-d"), LinkState("d-e"), rows=10)
    assert (record.cut_off, record.moved) == (8, 4)
    assert [pair.outcome for pair in record.pairs] == ["✕ cut off"] * 8 + ["↷ moved"] * 2
    assert [pair.extra for pair in record.pairs[8:]] == [15, 15]
    assert record.ledger_file == "r-ledger.csv"
    assert recorded(plan_of(SQUARE), LinkState("b-d")).ledger_file == ""


def test_totals_and_routers_are_the_ledgers() -> None:
    plan = demo("harbour-campus")
    record = recorded(plan, LinkState("l37"), LinkState("l38"), LinkCost("l6", 400, 0))
    ledger = Answers(Document(plan)).ledger_task()(never)
    rows = list(ledger)
    assert (record.moved, record.cut_off) == (ledger.moved, ledger.cut_off)
    assert record.pairs_changed == len(ledger) > 0
    for hit in record.routers_hit:
        mine = [row for row in rows if row.source == hit.id]
        assert hit.cut_off == sum(row.outcome == "cut off" for row in mine)
        moved = [row.cost_after - row.cost_before for row in mine if row.outcome == "moved"]
        assert hit.moved == len(moved)
        assert hit.extra == max(moved, default=None)
    assert {hit.id for hit in record.routers_hit} == {row.source for row in rows}
    assert most_changed(record.routers_hit) in {row.source for row in rows}
    assert most_changed(()) is None


def test_single_points_are_what_the_survey_finds() -> None:
    """A ring opened at one place: every other link of it cuts routers off."""
    plan = plan_of("a-b 1, b-c 1, c-d 1, d-a 1")
    record = recorded(plan, LinkState("d-a"))
    answers = Answers(Document(plan))
    failed = failures_of(plan, "links")
    cut_off = survey(answers.in_trial, "links", failed).cut_off
    expected = {failed[f].ids[0]: int(cut_off[f]) for f in range(4) if cut_off[f]}
    found = {p.id: p.cut_off_after for p in record.single_points if p.kind == "link"}
    assert found == expected == {"a-b": 6, "b-c": 8, "c-d": 6}
    assert all(point.is_new for point in record.single_points)
    assert {p.id for p in record.single_points if p.kind == "router"} == {"b", "c"}


def test_loads_before_and_after() -> None:
    plan = plan_of("a-b 5, b-c 5, a-c 20")
    plan.apply(edits.add(plan, Demand(source="a", target="c", mbps=40)))
    loads = recorded(plan, LinkState("a-b")).loads
    assert loads is not None
    carried = {(row.link, row.head): (row.mbps_before, row.mbps_after) for row in loads.links}
    assert carried == {("a-b", "b"): (40, 0), ("b-c", "c"): (40, 0), ("a-c", "c"): (0, 40)}
    assert (loads.undelivered_before, loads.undelivered_after) == (0, 0)
    assert recorded(plan_of(SQUARE), LinkState("b-d")).loads is None


def test_demand_that_finds_no_way_is_said() -> None:
    plan = plan_of("a-b 5, b-c 5")
    plan.apply(edits.add(plan, Demand(source="a", target="c", mbps=40)))
    summary = recorded(plan, LinkState("b-c")).summary
    assert summary[-1] == "40 Mbit/s of demand find no way (now 0)."


def test_html_says_it_all_and_fetches_nothing() -> None:
    plan = demo("harbour-campus")
    record = recorded(plan, LinkState("l37"), LinkState("l38"), rows=15)
    text = html(record)
    page = Page(text)
    steps = page.table("No.")
    assert [row[1] for row in steps] == [step.action for step in record.steps]
    assert len(page.table("From")) == 15
    assert [[row[0], row[1]] for row in page.table("From")] == [
        [pair.source, pair.target] for pair in record.pairs
    ]
    for said in (ORIGIN.checksum, ORIGIN.file, ORIGIN.written, "netsketch 1.2.3", "r-ledger.csv"):
        assert said in text
    for line in (*record.summary, *cautions.DOES_NOT):
        assert line.replace("'", "&#39;") in text
    assert not {"script", "link", "iframe", "object", "img"} & {tag for tag, _ in page.elements}
    assert not re.search(r'(src|href)="', text)
    assert f"{record.cut_off:,}" in [row for t in page.tables for row in t][3][1]


@pytest.mark.parametrize("form", [html, print_html])
def test_hostile_names_are_harmless_in_html(form: object) -> None:
    plan = plan_of(SQUARE)
    for name in HOSTILE:
        for router in "abcd":
            plan.apply(edits.rename(plan, router, name))
        plan.apply(edits.set_settings(plan, name=name))
        text = form(recorded(plan, LinkState("b-d")))  # type: ignore[operator]
        page = Page(text)
        assert not {"script", "img"} & {tag for tag, _ in page.elements}
        assert not [a for _, attrs in page.elements for a in attrs if a.startswith("on")]
        assert "\u202e" not in text
        assert len(text) < 40_000
        assert shown(name) in page.table("From")[0][0]


def test_hostile_names_are_harmless_in_markdown() -> None:
    plan = plan_of(SQUARE)
    for name in HOSTILE:
        for router in "abcd":
            plan.apply(edits.rename(plan, router, name))
        plan.apply(edits.set_settings(plan, name=name))
        text = markdown(recorded(plan, LinkState("b-d")), "r")
        bare = re.sub(r"\\[^\w\s]", "", text)  # what is behind a backslash is no markup
        assert "<" not in bare
        assert "](" not in bare
        assert "://" not in bare
        assert not re.search(r"www\.", bare)
        assert re.sub(r"`[0-9a-f]{64}`", "", bare).count("`") == 0
        _check_tables(bare)


def _check_tables(text: str) -> None:
    """Every row of a table has as many cells as its head."""
    for block in text.split("\n\n"):
        rows = block.splitlines()
        if rows[0].startswith("|"):
            assert len({row.count("|") for row in rows}) == 1


def test_hostile_names_are_harmless_in_csv() -> None:
    plan = plan_of(SQUARE)
    for name in HOSTILE:
        plan.apply(edits.rename(plan, "d", name))
        recorded(plan, LinkState("b-d"))
        ledger = Answers(Document(plan)).ledger_task()(never)
        text = b"".join(ledger_csv(plan, ledger)).decode("utf-8-sig")
        rows = list(csv.reader(io.StringIO(text, newline="")))
        assert tuple(rows[0]) == LEDGER_COLUMNS
        assert len(rows) == 1 + len(ledger)
        names = {row[3] for row in rows[1:] if row[1] == "d"}
        assert names == {"'" + name if name.startswith("=") else name}
        assert not [cell for row in rows for cell in row if cell.startswith(("=", "@", "+"))]


def test_csv_holds_the_whole_ledger() -> None:
    plan = demo("harbour-campus")
    recorded(plan, NodeState("r1"), LinkState("l37"))
    ledger = Answers(Document(plan)).ledger_task()(never)
    text = b"".join(ledger_csv(plan, ledger)).decode("utf-8-sig")
    rows = list(csv.reader(io.StringIO(text, newline="")))[1:]
    cells = [["" if c is None else str(c) for c in ledger_cells(plan, row)] for row in ledger]
    assert rows == cells


def test_names_are_shown_on_one_line_and_isolated() -> None:
    assert shown("a\nb\x00 c") == "a b c"
    assert shown("x" * 10_000) == "x" * LONGEST + "…"
    assert shown("אב") == "\u2068אב\u2069"
    assert shown("👷🏽‍♀️") == "👷🏽‍♀️"


def test_two_of_one_name_are_told_apart_by_id() -> None:
    plan = plan_of("a-b 5, b-c 5")
    for router in "ac":
        plan.apply(edits.rename(plan, router, "Twin"))
    record = recorded(plan, LinkState("a-b"))
    assert record.steps[0].action == "Take link a-b (Twin (a) – b) down"


def test_pictures_stand_in_the_page_and_beside_markdown() -> None:
    record = recorded(plan_of(SQUARE), LinkState("b-d"))
    pictures = tuple(Picture(name, f"The routes {name}", SVG) for name in ("before", "after"))
    drawn = Record(**{f: getattr(record, f) for f in record.__dataclass_fields__} | {
        "pictures": pictures
    })  # fmt: skip
    assert html(drawn).count("<svg ") == 2
    assert "<?xml" not in html(drawn)
    assert print_html(drawn).count('<img src="picture:') == 2
    text = markdown(drawn, "my record")
    assert "![The routes before](my%20record-before.svg)" in text


def test_ids_of_pictures_do_not_clash() -> None:
    svg = '<svg><defs><mask id="m"/></defs><rect fill="url(#m)"/><text> id="m" m</text></svg>'
    assert inline_svg(svg, "p1-").startswith('<svg><defs><mask id="p1-m"/>')
    assert 'fill="url(#p1-m)"' in inline_svg(svg, "p1-")


def test_a_plan_that_left_its_file_is_said_to() -> None:
    record = recorded(plan_of(SQUARE), LinkState("b-d"))
    fields = {f: getattr(record, f) for f in record.__dataclass_fields__}
    gone = Record(**fields | {"origin": Origin("p.json", "00", False, "1", "now")})
    assert "differs from that file" in html(gone)
    assert "edited since that file" in markdown(gone, "r")
    assert "differs from that file" not in html(record)


def test_nothing_that_changes_is_said_plainly() -> None:
    """A link that no route uses goes down."""
    record = recorded(plan_of("a-b 5, b-c 5, a-c 99"), LinkState("a-c"))
    assert record.pairs_changed == 0
    assert record.summary[0] == "No route of any router changes."
    assert "The ledger is empty" in html(record)
    assert "The ledger is empty" in markdown(record, "r")


@settings(max_examples=25, deadline=None)
@given(st.data())
def test_any_plan_has_a_record(data: st.DataObject) -> None:
    plan = data.draw(strategies.plans())
    record = recorded(plan)
    Page(html(record))
    _check_tables(re.sub(r"\\[^\w\s]", "", markdown(record, "r")))
    assert len(record.steps) == len(record.way_back) == len(plan.trial.changes)
