"""Answers: current after every edit, equal to answers from scratch, one set of rules."""

from __future__ import annotations

from hypothesis import given, settings
from hypothesis import strategies as st

from netsketch.analysis import RouteRow
from netsketch.model import Plan, edits
from netsketch.routing import NextHop, never
from netsketch.session import pairs
from netsketch.session.answers import Answers
from netsketch.session.document import Document
from tests import reference, strategies
from tests.published import rfc2328_figure_2


@settings(deadline=None, max_examples=40)
@given(plan=strategies.plans(max_nodes=6), data=st.data())
def test_after_any_edits_answers_equal_fresh_ones(plan: Plan, data: st.DataObject) -> None:
    document = Document(plan)
    live = Answers(document)
    for _ in range(4):
        document.apply(data.draw(strategies.edits_on(document.plan)))
        fresh = Answers(Document(document.plan.snapshot()))
        ledger, again = live.ledger_task()(never), fresh.ledger_task()(never)
        assert list(ledger) == list(again)
        for router in document.plan.routers():
            mine, other = live.outward(router.id), fresh.outward(router.id)
            assert (mine.rows, mine.changed) == (other.rows, other.changed)
            assert mine.reading == other.reading
            assert live.effect(router.id) == fresh.effect(router.id)
            listed = {r.target: r.outcome for r in ledger if r.source == router.id}
            kinds = {row.to: row.kind for row in mine.rows}
            on_routers = {k: word for k, word in mine.changed.items() if kinds[k] == "router"}
            assert on_routers == listed


@settings(deadline=None, max_examples=40)
@given(plan=strategies.plans(max_nodes=6))
def test_tables_and_paths_follow_the_trial(plan: Plan) -> None:
    document = Document(plan)
    live = Answers(document)
    expected = reference.answers(reference.with_trial(plan, plan.trial))
    for source, answer in expected.items():
        rows = {row.to: row for row in live.outward(source).rows}
        assert list(rows) == sorted(rows)
        assert set(rows) == {node.id for node in plan.nodes} - {source}
        for target, row in rows.items():
            assert row.cost == answer.distance.get(target)
            assert set(row.next_hops) == answer.next_hops.get(target, set())
            path = live.path(source, target)
            assert path.cost == row.cost
            first = {share.link for share in path.links if share.tail == source}
            assert first == {hop.link for hop in row.next_hops}


def test_a_row_of_the_table() -> None:
    document = Document(rfc2328_figure_2())
    row = next(r for r in Answers(document).outward("RT6").rows if r.to == "N6")
    # RFC 2328, Table 2: N6 by RT10 at 8.
    assert row == RouteRow("N6", "segment", 8, 2, None, (NextHop("RT6-RT10", "RT10"),))


def test_effect_and_path_readings() -> None:
    document = Document(rfc2328_figure_2())
    live = Answers(document)
    document.apply(edits.toggle_down(document.plan, links=["RT6-RT10"]))
    reading = live.effect("RT6")
    # Derived from RFC 2328, Figure 2: with RT6-RT10 down N8 goes by RT5.
    assert reading.plates["N8"].moved
    assert reading.plates["N8"].cost == 16
    assert not reading.plates["N1"].moved
    assert "before" in {travel.role for travel in reading.links["RT6-RT10"].travels}
    assert "after" in {travel.role for travel in reading.links["RT5-RT7"].travels}
    path = live.path("RT6", "RT10")
    roles = {travel.role for mark in path.reading.links.values() for travel in mark.travels}
    assert roles == {"path", "way back"}
    assert [(share.tail, share.head) for share in path.links] == [
        ("RT6", "RT5"), ("RT5", "RT7"), ("RT7", "N6"), ("N6", "RT10"),
    ]  # fmt: skip


def test_prepare_makes_ready() -> None:
    live = Answers(Document.new())
    assert not live.ready
    live.prepare()
    assert live.ready


def test_large_plans_keep_no_pairs_and_answer_the_same(monkeypatch) -> None:  # type: ignore[no-untyped-def]
    document = Document(rfc2328_figure_2())
    live = Answers(document)
    document.apply(edits.toggle_down(document.plan, nodes=["RT10"]))
    kept = live.ledger_task()(never)
    assert live.keeps_all_pairs
    monkeypatch.setattr(pairs, "MOST_KEPT", 5)
    assert not live.keeps_all_pairs
    assert list(live.ledger_task()(never)) == list(kept)


def test_closed_answers_stop_listening() -> None:
    document = Document(rfc2328_figure_2())
    live = Answers(document)
    before = live.network
    live.close()
    document.apply(edits.set_costs(document.plan, "RT6-RT10", 1, 1))
    assert live.network is before
