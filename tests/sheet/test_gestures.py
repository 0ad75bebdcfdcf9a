"""What a person does with the mouse, and the edits that come of it."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt

from netsketch.model import edits
from tests.sheet.conftest import SHIFT, Hands, near

pytestmark = pytest.mark.gui


def test_a_small_network_is_drawn_with_tools_alone(empty: Hands) -> None:
    sheet = empty.sheet
    sheet.set_tool("router")
    for at in (QPoint(200, 150), QPoint(600, 150), QPoint(400, 420)):
        empty.click(at)
    assert [r.id for r in empty.plan.routers()] == ["r1", "r2", "r3"]
    sheet.set_tool("link")
    empty.drag(empty.at("r1"), empty.at("r2"))
    empty.click(empty.at("r2"))
    empty.click(empty.at("r3"))
    assert [link.ends for link in empty.plan.links] == [("r1", "r2"), ("r2", "r3")]
    assert sheet.tool == "link"
    assert sheet.selected_links == ["l2"]
    while empty.document.undo_label:
        empty.document.undo()
    assert not empty.plan.nodes
    assert sheet.selected_nodes == []


def test_double_click_on_empty_paper_draws_a_router_there(empty: Hands) -> None:
    empty.double_click(QPoint(300, 200))
    (router,) = empty.plan.routers()
    assert near(empty.at(router.id), QPoint(300, 200))
    assert empty.sheet.selected_nodes == [router.id]


def test_segment_tool_draws_a_rail_that_links_drop_on_to(hands: Hands) -> None:
    hands.sheet.set_tool("segment")
    hands.click(hands.paper(150, 400))
    (rail,) = [s for s in hands.plan.segments() if s.id != "s1"]
    hands.sheet.set_tool("link")
    hands.drag(hands.at("r3"), hands.at(rail.id))
    (link,) = hands.plan.links_at(rail.id)
    assert (link.cost, link.cost_back) == (10, 0)
    lines, row = hands.sheet.frame.lines, hands.sheet.frame.contents.links.row[link.id]
    assert abs(lines.along[row]).tolist() == [0, 1]


def test_a_link_between_segments_is_refused_in_words(hands: Hands) -> None:
    hands.sheet.set_tool("segment")
    hands.click(hands.paper(150, 400))
    other = hands.plan.segments()[-1].id
    before = len(hands.plan.links)
    hands.sheet.set_tool("link")
    hands.drag(hands.at("s1"), hands.at(other))
    assert len(hands.plan.links) == before
    assert "segment" in hands.hints[-1]


def test_a_link_that_ends_on_paper_is_not_drawn(hands: Hands) -> None:
    hands.sheet.set_tool("link")
    hands.drag(hands.at("r1"), hands.paper(150, 130))
    assert hands.proposed == []
    assert "plate" in hands.hints[-1]


def test_escape_drops_the_line_of_a_link_then_the_tool(hands: Hands) -> None:
    hands.sheet.set_tool("link")
    hands.click(hands.at("r1"))
    hands.move(hands.at("r2"))
    hands.press(Qt.Key.Key_Escape)
    assert hands.sheet.tool == "link"
    hands.press(Qt.Key.Key_Escape)
    assert hands.sheet.tool == "select"
    hands.click(hands.at("r2"))
    assert hands.proposed == []


def test_a_click_selects_and_asks_the_focus(hands: Hands) -> None:
    for key, kind in (("r2", "router"), ("s1", "segment"), ("l1", "link")):
        hands.click(hands.at(key))
        assert hands.asked[-1] == (kind, key)
    assert (hands.sheet.selected_nodes, hands.sheet.selected_links) == ([], ["l1"])
    hands.click(QPoint(880, 580))
    assert hands.asked[-1] is None
    assert hands.sheet.selected_links == []


def test_shift_adds_to_the_selection_and_takes_from_it(hands: Hands) -> None:
    hands.click(hands.at("r1"))
    hands.click(hands.at("r2"), SHIFT)
    hands.click(hands.at("l2"), SHIFT)
    assert (hands.sheet.selected_nodes, hands.sheet.selected_links) == (["r1", "r2"], ["l2"])
    hands.click(hands.at("r1"), SHIFT)
    assert hands.sheet.selected_nodes == ["r2"]


def test_a_drag_moves_a_plate_by_one_edit(hands: Hands) -> None:
    start = hands.at("r2")
    hands.drag(start, start + QPoint(40, -30))
    assert len(hands.proposed) == 1
    assert near(hands.at("r2"), start + QPoint(40, -30))
    hands.document.undo()
    assert near(hands.at("r2"), start)


def test_a_drag_moves_all_that_is_selected_together(hands: Hands) -> None:
    hands.sheet.select(["r1", "r3"])
    before = {key: hands.at(key) for key in ("r1", "r2", "r3")}
    hands.drag(before["r1"], before["r1"] + QPoint(25, 35))
    assert len(hands.proposed) == 1
    assert near(hands.at("r3"), before["r3"] + QPoint(25, 35))
    assert near(hands.at("r2"), before["r2"])


def test_escape_puts_a_dragged_plate_back(hands: Hands) -> None:
    start = hands.at("r2")
    hands.drag(start, start + QPoint(80, 80), drop=False)
    assert hands.at("r2") != start
    hands.press(Qt.Key.Key_Escape)
    assert near(hands.at("r2"), start)
    hands.bot.mouseRelease(hands.sheet, Qt.MouseButton.LeftButton, pos=start)
    assert hands.proposed == []


def test_a_rubber_band_selects_what_it_takes_in(hands: Hands) -> None:
    hands.drag(hands.paper(-80, -60), hands.paper(380, 60))
    assert (hands.sheet.selected_nodes, hands.sheet.selected_links) == (["r1", "r2"], ["l1"])
    hands.drag(hands.paper(60, 340), hands.paper(240, 220), keys=SHIFT)
    assert hands.sheet.selected_nodes == ["r1", "r2", "r3"]
    assert hands.proposed == []


def test_the_middle_button_and_the_space_bar_pan(hands: Hands) -> None:
    start = hands.at("r1")
    hands.drag(QPoint(400, 300), QPoint(450, 320), button=Qt.MouseButton.MiddleButton)
    assert near(hands.at("r1"), start + QPoint(50, 20))
    hands.bot.keyPress(hands.sheet, Qt.Key.Key_Space)
    hands.drag(QPoint(400, 300), QPoint(370, 300))
    hands.bot.keyRelease(hands.sheet, Qt.Key.Key_Space)
    assert near(hands.at("r1"), start + QPoint(20, 20))
    assert hands.proposed == []


def test_the_pointer_tells_what_a_press_would_do(hands: Hands) -> None:
    shapes = Qt.CursorShape
    hands.move(hands.at("r1"))
    assert hands.sheet.cursor().shape() == shapes.PointingHandCursor
    hands.move(QPoint(880, 580))
    assert hands.sheet.cursor().shape() == shapes.ArrowCursor
    hands.sheet.set_tool("router")
    assert hands.sheet.cursor().shape() == shapes.CrossCursor


def test_a_right_click_selects_and_asks_for_a_menu(hands: Hands) -> None:
    from PySide6.QtGui import QContextMenuEvent
    from PySide6.QtWidgets import QApplication

    at = hands.at("r3")
    event = QContextMenuEvent(QContextMenuEvent.Reason.Mouse, at, hands.sheet.mapToGlobal(at))
    QApplication.sendEvent(hands.sheet, event)
    assert hands.menus == [(("router", "r3"), hands.sheet.mapToGlobal(at))]
    assert hands.sheet.selected_nodes == ["r3"]


def test_no_such_tool_is_an_error(hands: Hands) -> None:
    with pytest.raises(ValueError, match="no such tool: saw"):
        hands.sheet.set_tool("saw")


def test_an_undo_in_the_middle_of_a_drag_ends_it(hands: Hands) -> None:
    hands.document.apply(edits.add_router(hands.plan, 600, 300))
    hands.drag(hands.at("r5"), hands.at("r5") + QPoint(-60, 0), drop=False)
    hands.document.undo()
    hands.move(QPoint(100, 100), Qt.MouseButton.LeftButton)
    hands.bot.mouseRelease(hands.sheet, Qt.MouseButton.LeftButton, pos=QPoint(100, 100))
    assert hands.proposed == []
    assert "r5" not in hands.sheet.frame.contents.nodes.ids


def test_an_undo_in_the_middle_of_writing_closes_the_line(hands: Hands) -> None:
    hands.document.apply(edits.add_router(hands.plan, 600, 300))
    hands.sheet.begin_rename("r5")
    hands.document.undo()
    assert hands.sheet._writing.line is None
    assert hands.proposed == []


def test_resting_on_a_thing_tells_about_it(hands: Hands) -> None:
    hands.document.apply(edits.rename(hands.plan, "r1", "<b>Quay</b>"))
    hands.document.apply(edits.toggle_drained(hands.plan, ["r1"]))
    hands.document.apply(edits.toggle_down(hands.plan, links=["l2"]))
    words = hands.sheet._pointer.words
    told = words(QPointF(hands.at("r1")))
    assert "&lt;b&gt;Quay&lt;/b&gt;" in told
    assert "router, North, drained" in told
    told = words(QPointF(hands.at("l2") + QPoint(14, 24)))
    assert "cost 25 from Shed" in told
    assert "down" in told
    assert "cost 0" not in words(QPointF(hands.at("l3")))
    assert words(QPointF(880, 580)) == ""
