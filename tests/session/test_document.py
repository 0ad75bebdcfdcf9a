"""Documents: undo of everything, the saved mark, opening and saving."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from netsketch.formats import FormatError, native
from netsketch.model import ChangeSet, Plan, PlanError, edits
from netsketch.session.document import Document
from tests import strategies
from tests.published import rfc2328_figure_2


def drawn() -> Document:
    document = Document.new()
    for x in (0, 200, 400):
        document.apply(edits.add_router(document.plan, x, 0))
    document.apply(edits.add_link(document.plan, "r1", "r2"))
    return document


@settings(deadline=None, max_examples=40)
@given(plan=strategies.plans(), data=st.data())
def test_undoing_and_redoing_everything(plan: Plan, data: st.DataObject) -> None:
    document = Document(plan)
    start = native.dumps(plan)
    for _ in range(data.draw(st.integers(0, 8))):
        document.apply(data.draw(strategies.edits_on(document.plan)))
    end = native.dumps(document.plan)
    while document.undo_label is not None:
        document.undo()
    assert native.dumps(document.plan) == start
    assert not document.is_modified
    while document.redo_label is not None:
        document.redo()
    assert native.dumps(document.plan) == end


def test_undo_names_what_it_takes_back() -> None:
    document = drawn()
    document.apply(edits.toggle_down(document.plan, ["r1", "r2"]))
    assert document.undo_label == "take 2 routers down"
    document.undo()
    assert document.redo_label == "take 2 routers down"
    assert not document.plan.trial


def test_a_new_edit_gives_up_what_was_undone() -> None:
    document = drawn()
    document.undo()
    document.apply(edits.rename(document.plan, "r1", "Mole"))
    assert document.redo_label is None


def test_nudges_are_undone_as_one() -> None:
    document = drawn()
    for x in (1, 2, 3):
        document.apply(edits.move(document.plan, {"r1": (x, 0)}, merge="nudge r1"))
    document.apply(edits.move(document.plan, {"r2": (9, 9)}, merge="nudge r2"))
    document.undo()
    document.undo()
    assert (document.plan.nodes["r1"].x, document.plan.nodes["r2"].x) == (0, 200)
    document.redo()
    assert document.plan.nodes["r1"].x == 3


def test_a_nudge_after_saving_is_an_edit_of_its_own(tmp_path: Path) -> None:
    document = drawn()
    document.apply(edits.move(document.plan, {"r1": (1, 0)}, merge="nudge"))
    document.save(tmp_path / "a.netsketch.json")
    document.apply(edits.move(document.plan, {"r1": (2, 0)}, merge="nudge"))
    document.undo()
    assert not document.is_modified
    assert document.plan.nodes["r1"].x == 1


def test_an_edit_without_steps_is_no_edit() -> None:
    document = drawn()
    label = document.undo_label
    document.apply(edits.rename(document.plan, "r1", document.plan.nodes["r1"].name))
    assert document.undo_label == label


def test_a_refused_edit_leaves_everything() -> None:
    document = drawn()
    before = native.dumps(document.plan)
    heard: list[ChangeSet] = []
    document.subscribe(heard.append)
    with pytest.raises(PlanError, match="cost 0 is outside"):
        document.apply(edits.set_costs(document.plan, "l1", 0, 10))
    assert native.dumps(document.plan) == before
    assert heard == []


def test_listeners_hear_every_change_set_until_they_leave() -> None:
    document = drawn()
    heard: list[ChangeSet] = []
    leave = document.subscribe(heard.append)
    document.apply(edits.set_costs(document.plan, "l1", 5, 6))
    document.undo()
    document.redo()
    assert [change.revision for change in heard] == sorted({c.revision for c in heard})
    assert heard[0].steps == heard[2].steps
    leave()
    document.undo()
    assert len(heard) == 3


def test_saved_mark_follows_undo_and_redo(tmp_path: Path) -> None:
    document = drawn()
    assert document.is_modified
    assert document.title == "Untitled"
    document.save(tmp_path / "plan.netsketch.json")
    assert (document.is_modified, document.title) == (False, "plan.netsketch.json")
    document.undo()
    assert document.is_modified
    document.redo()
    assert not document.is_modified


def test_reopening_gives_the_plan_back(tmp_path: Path) -> None:
    document = drawn()
    document.apply(edits.toggle_down(document.plan, links=["l1"]))
    path = tmp_path / "plan.netsketch.json"
    document.save(path)
    again = Document.open(path)
    assert again.plan == document.plan
    assert (again.path, again.is_modified, again.undo_label) == (path, False, None)
    saved = path.read_bytes()
    again.save()
    assert path.read_bytes() == saved


def test_an_import_gets_places_and_is_saved_under_a_new_name(tmp_path: Path) -> None:
    source = tmp_path / "as.graphml"
    document = Document(rfc2328_figure_2())
    document.save(source)
    assert document.path is None, "a copy in another format is not the document's file"
    opened = Document.open(source)
    assert opened.path is None
    assert opened.suggested == tmp_path / "as"
    places = {(node.x, node.y) for node in opened.plan.nodes}
    assert None not in {x for x, _ in places}
    assert len(places) == len(opened.plan.nodes)


def test_a_bad_file_is_refused_by_name(tmp_path: Path) -> None:
    path = tmp_path / "bad.netsketch.json"
    path.write_text('{"format": "netsketch", "version": 1, "nodes": [')
    with pytest.raises(FormatError, match=r"bad\.netsketch\.json"):
        Document.open(path)


def test_saving_without_a_file_needs_a_path() -> None:
    with pytest.raises(ValueError, match="path"):
        drawn().save()


def test_a_failed_save_keeps_file_and_mark(tmp_path: Path) -> None:
    document = drawn()
    with pytest.raises(FormatError):
        document.save(tmp_path / "nowhere" / "plan.netsketch.json")
    assert document.is_modified
    assert document.path is None
