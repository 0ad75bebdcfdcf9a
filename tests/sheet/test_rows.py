"""A drawing that follows edits is the drawing of the plan read anew."""

from __future__ import annotations

from dataclasses import fields, is_dataclass
from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from netsketch.model import AddedLink, Link, Plan, Router, edits
from netsketch.readings.reading import LinkMark, PlateMark, Reading, Travel
from netsketch.session.document import Document
from netsketch.sheet.contents import unit_for
from netsketch.sheet.drawing import Drawing
from netsketch.sheet.frame import frame_of
from netsketch.sheet.lettering import Lettering
from netsketch.sheet.look import LIGHT
from netsketch.sheet.rows import contents_of
from tests.sheet.conftest import quay_plan
from tests.strategies import edits_on, plans

pytestmark = [pytest.mark.gui, pytest.mark.usefixtures("qapp")]


def following(plan: Plan) -> tuple[Document, Drawing]:
    """Return a document with a drawing that follows it and has been looked at once."""
    document, drawing = Document(plan), Drawing(lambda: None, lambda: None)
    drawing.set_document(document)
    assert len(drawing.frame.nodes) == len(plan.nodes)
    return document, drawing


def assert_equal(one: Any, other: Any, place: str = "frame") -> None:
    """Compare everything in two frames, arrays and all."""
    if is_dataclass(one):
        assert type(one) is type(other), place
        for part in fields(one):
            if part.name != "lettering":
                a, b = getattr(one, part.name), getattr(other, part.name)
                assert_equal(a, b, f"{place}.{part.name}")
    elif isinstance(one, dict):
        assert list(one) == list(other), place
        for key in one:
            assert_equal(one[key], other[key], f"{place}[{key}]")
    elif isinstance(one, list | tuple):
        for a, b in zip(one, other, strict=True):
            assert_equal(a, b, place)
    elif isinstance(one, np.ndarray):
        assert one.dtype == other.dtype, place
        np.testing.assert_allclose(one, other, err_msg=place)
    else:
        assert one == other, place


def assert_as_read_anew(drawing: Drawing) -> None:
    anew = frame_of(drawing.plan, drawing.reading, drawing.look, Lettering(), drawing.unit)
    assert_equal(drawing.frame, anew)


def reading_of(plan: Plan, text: str) -> Reading:
    """Return a reading that marks every other link and node."""
    links = {key: LinkMark((Travel(1, "path"),), text) for key in plan.links.keys()[::2]}
    return Reading(
        "path", (), "", links, {key: PlateMark("reached") for key in plan.nodes.keys()[::2]}
    )


@settings(
    deadline=None, max_examples=150, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
@given(st.data())
def test_after_any_edits_the_frame_is_the_plan_read_anew(data: st.DataObject) -> None:
    document, drawing = following(data.draw(plans()))
    text = data.draw(st.sampled_from(["none", "", "50 %"]))
    if text != "none":
        drawing.set_reading(reading_of(document.plan, text), LIGHT)
    for _ in range(data.draw(st.integers(1, 4))):
        document.apply(data.draw(edits_on(document.plan)))
        if data.draw(st.booleans()):
            assert_as_read_anew(drawing)
    if data.draw(st.booleans()):
        drawing.set_reading(None, LIGHT)
    assert_as_read_anew(drawing)
    while document.undo_label is not None:
        document.undo()
    assert_as_read_anew(drawing)


def test_a_small_edit_takes_over_what_it_leaves_alone() -> None:
    document, drawing = following(quay_plan())
    lines, rows = drawing.frame.lines, drawing.frame.contents.nodes.row
    document.apply(edits.try_costs(document.plan, "l1", 7, 9))
    document.apply(edits.toggle_down(document.plan, links=["l2"]))
    document.apply(edits.set_costs(document.plan, "l3", 70, 0))
    assert drawing.frame.lines is lines
    assert drawing.frame.contents.nodes.row is rows
    assert "10 → 7" in drawing.frame.tags.texts
    document.apply(edits.add_link(document.plan, "r2", "r3"))
    assert drawing.frame.lines is not lines
    assert_as_read_anew(drawing)


def test_a_thing_drawn_again_under_its_old_id_is_read_again() -> None:
    document, drawing = following(quay_plan())
    plan = document.plan
    document.apply(edits.remove(plan, ["r1"]))
    document.apply(edits.add(plan, Router(id="r1", name="Another", x=-90, y=40)))
    document.apply(edits.add(plan, Link(id="l1", source="r3", target="r1", cost=1, cost_back=2)))
    assert drawing.frame.contents.nodes.names[3] == "Another"
    assert_as_read_anew(drawing)


def test_what_was_dragged_is_back_before_an_edit_is_followed() -> None:
    document, drawing = following(quay_plan())
    drawing.lift([0])
    drawing.shift([0], np.array([[999.0, 999.0]]))
    assert drawing.frame.contents.nodes.x[0] == 999
    document.apply(edits.rename(document.plan, "r2", "Hoist"))
    assert drawing.frame.contents.nodes.x[0] == 0
    assert_as_read_anew(drawing)


def test_a_link_that_only_the_trial_has_is_drawn() -> None:
    document, drawing = following(quay_plan())
    change = AddedLink("l9", "r2", "r3", 4, 4)
    document.apply(edits.try_changes(document.plan, [change], "try a link"))
    links = drawing.frame.contents.links
    assert links.ids[-1] == "l9"
    assert links.added.tolist() == links.tried.tolist() == [False, False, False, True]
    document.apply(edits.adopt(document.plan))
    assert not drawing.frame.contents.links.added.any()
    document.undo()
    document.undo()
    assert drawing.frame.contents.links.ids == ["l1", "l2", "l3"]
    assert_as_read_anew(drawing)


def test_nodes_without_a_place_stand_on_a_grid() -> None:
    plan = Plan()
    plan.apply(edits.add(plan, *(Router(id=f"r{i}") for i in range(14))))
    document, drawing = following(plan)
    document.apply(edits.remove(plan, ["r0"]))
    assert_as_read_anew(drawing)
    nodes = contents_of(plan, Lettering(), unit_for(plan)).nodes
    assert len(set(zip(nodes.x.tolist(), nodes.y.tolist(), strict=True))) == 13
