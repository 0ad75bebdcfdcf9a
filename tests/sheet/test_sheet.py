"""What the sheet shows: readings, looks, views, and that it follows the document."""

# ruff: noqa: N802  (Qt names the event handlers)

from __future__ import annotations

import itertools
from collections.abc import Callable

import numpy as np
import pytest
from PySide6.QtCore import QEvent, QObject, QPoint, QPointF, Qt
from PySide6.QtGui import QColor, QImage, QWheelEvent
from PySide6.QtWidgets import QApplication, QWidget
from pytestqt.qtbot import QtBot

from netsketch.model import Plan, edits
from netsketch.readings.reading import (
    FirstHop,
    LinkMark,
    PlateMark,
    Reading,
    Travel,
    letter,
)
from netsketch.sheet import resting
from netsketch.sheet.look import DARK, LIGHT
from tests.sheet.conftest import Hands, quay_plan

pytestmark = pytest.mark.gui

HOPS = tuple(FirstHop(letter(i), i, f"l{i + 1}", f"r{i + 2}") for i in range(2))
OUTWARD = Reading(
    "outward",
    ("r1",),
    "Routes from Quay",
    {
        "l1": LinkMark((Travel(1, "tree", (0,)),)),
        "l3": LinkMark((Travel(1, "tree", (0,)),)),
    },
    {
        "r1": PlateMark("focus"),
        "r2": PlateMark("reached", (0,), 10),
        "s1": PlateMark("reached", (0, 1), 15),
    },
    HOPS,
)


def picture(hands: Hands) -> QImage:
    hands.sheet._rest.stop()
    return hands.sheet.grab().toImage()


def count(image: QImage, colour: str) -> int:
    """Return how many pixels have exactly this colour."""
    wanted = QColor(colour).rgb()
    return sum(
        image.pixel(x, y) == wanted for x in range(image.width()) for y in range(image.height())
    )


def tree(way: int, *letters: int) -> LinkMark:
    return LinkMark((Travel(way, "tree", letters),))


def test_the_bare_sheet_is_ink_on_paper(hands: Hands) -> None:
    image = picture(hands)
    assert count(image, LIGHT.ink) > 200
    for colour in (*LIGHT.first_hops, LIGHT.path, LIGHT.way_back):
        assert count(image, colour) == 0


@pytest.mark.parametrize("look", [LIGHT, DARK], ids=["light", "dark"])
def test_a_reading_inverts_the_focus_and_colours_its_first_hops(hands: Hands, look: object) -> None:
    hands.sheet.set_look(look)
    hands.sheet.set_reading(OUTWARD)
    image = picture(hands)
    corner = hands.at("r1") + QPoint(-28, -16)
    assert image.pixelColor(corner) == QColor(hands.sheet.look.ink)
    for hop in HOPS:
        assert count(image, hands.sheet.look.first_hops[hop.colour]) > 50
    hands.sheet.set_reading(None)
    assert count(picture(hands), hands.sheet.look.first_hops[0]) == 0


def test_the_direction_of_travel_shows(hands: Hands) -> None:
    pictures = []
    for way in (1, -1):
        hands.sheet.set_reading(Reading("outward", (), "", {"l1": tree(way, 0)}, {}, HOPS))
        pictures.append(picture(hands))
    assert pictures[0] != pictures[1]


@pytest.mark.parametrize(
    ("one", "other"), [("path", "way back"), ("before", "after")], ids=["path", "effect"]
)
def test_roles_differ_without_colour(hands: Hands, one: str, other: str) -> None:
    grey = []
    for role in (one, other):
        mark = LinkMark((Travel(1, role),))  # type: ignore[arg-type]
        hands.sheet.set_reading(Reading("path", (), "", {"l1": mark}))
        image = picture(hands).convertToFormat(QImage.Format.Format_Grayscale8)
        row = hands.at("l1").y()
        paper = QColor(LIGHT.paper).lightness()
        start, end = hands.at("r1").x() + 60, hands.at("r2").x() - 60
        inked = [image.pixelColor(x, row).lightness() < paper - 40 for x in range(start, end)]
        grey.append(sum(a != b for a, b in itertools.pairwise(inked)))
    assert abs(grey[0] - grey[1]) > 10


def test_every_state_changes_the_picture(hands: Hands) -> None:
    plan, seen = hands.plan, [picture(hands)]
    for edit in (
        lambda: edits.toggle_down(plan, links=["l1"]),
        lambda: edits.toggle_down(plan, nodes=["r3"]),
        lambda: edits.toggle_down(plan, nodes=["s1"]),
        lambda: edits.toggle_drained(plan, ["r2"]),
        lambda: edits.try_costs(plan, "l2", 7, 7),
        lambda: edits.adopt(plan),
    ):
        hands.document.apply(edit())
        seen.append(picture(hands))
    for place, image in enumerate(seen):
        assert image not in seen[:place]


@pytest.mark.parametrize(
    "mark",
    [
        PlateMark("cut off"),
        PlateMark("target", (), 10),
        PlateMark("reached", (0,), 10),
        PlateMark("reached", (0,), 10, moved=True),
        PlateMark("reached", (0, 1), 10),
        PlateMark("reached", (), 10),
        PlateMark("focus"),
    ],
    ids=str,
)
def test_every_plate_role_has_a_look_of_its_own(hands: Hands, mark: PlateMark) -> None:
    def shown(what: PlateMark) -> QImage:
        hands.sheet.set_reading(Reading("effect", (), "", {}, {"r2": what}, HOPS))
        return picture(hands)

    assert shown(mark) != shown(PlateMark(""))


def test_a_lit_path_lies_above_the_reading(hands: Hands) -> None:
    before = picture(hands)
    hands.sheet.light_path({"l1": 1, "gone": 1})
    lit = picture(hands)
    hands.sheet.light_path({"l1": -1})
    assert before != lit != picture(hands)
    hands.sheet.light_path(None)
    assert picture(hands) == before


def test_a_reading_of_what_is_not_there_is_harmless(hands: Hands) -> None:
    before = picture(hands)
    hands.sheet.set_reading(OUTWARD)
    hands.document.apply(edits.remove(hands.plan, ["r1", "r2", "r3", "s1"]))
    picture(hands)
    hands.document.undo()
    hands.sheet.set_reading(None)
    assert picture(hands) == before


def test_an_empty_sheet_says_how_to_begin(empty: Hands) -> None:
    before = picture(empty)
    assert count(before, LIGHT.ink) > 100
    empty.document.apply(edits.add_router(empty.plan, 5000, 5000))
    assert count(picture(empty), LIGHT.ink) == 0


def test_a_panned_picture_is_the_picture_painted_anew(hands: Hands) -> None:
    hands.sheet.set_reading(OUTWARD)
    picture(hands)
    for way in ((37, 0), (0, -41), (-90, 25), (2000, 10)):
        hands.sheet.show_view(hands.sheet.view.panned(*way))
        pushed = picture(hands)
        hands.sheet.drawing.stale = True
        assert picture(hands) == pushed


def test_dragging_shows_what_dropping_keeps(hands: Hands) -> None:
    start = hands.at("r2")
    hands.drag(start, start + QPoint(50, 60), drop=False)
    during = count(picture(hands), LIGHT.ink)
    hands.bot.mouseRelease(hands.sheet, Qt.MouseButton.LeftButton, pos=start + QPoint(50, 60))
    assert count(picture(hands), LIGHT.ink) == pytest.approx(during, rel=0.1)


def turn_wheel(hands: Hands, at: QPoint, pixels: QPoint, keys: Qt.KeyboardModifier) -> None:
    event = QWheelEvent(
        QPointF(at),
        QPointF(hands.sheet.mapToGlobal(at)),
        pixels,
        QPoint(0, 120),
        Qt.MouseButton.NoButton,
        keys,
        Qt.ScrollPhase.NoScrollPhase,
        False,
    )
    QApplication.sendEvent(hands.sheet, event)


def test_a_wheel_zooms_at_the_pointer_and_fingers_pan(hands: Hands) -> None:
    at, scale = hands.at("r3"), hands.sheet.view.scale
    turn_wheel(hands, at, QPoint(), Qt.KeyboardModifier.NoModifier)
    assert hands.sheet.view.scale == pytest.approx(scale * 1.2)
    assert (hands.at("r3") - at).manhattanLength() <= 2
    turn_wheel(hands, at, QPoint(15, 40), Qt.KeyboardModifier.NoModifier)
    assert hands.sheet.view.scale == pytest.approx(scale * 1.2)
    assert (hands.at("r3") - at - QPoint(15, 40)).manhattanLength() <= 2


def test_fit_shows_everything_and_show_thing_brings_one_in(hands: Hands) -> None:
    hands.sheet.zoom_to(3)
    hands.sheet.show_thing("s1")
    assert hands.sheet.rect().contains(hands.at("s1"))
    hands.sheet.show_thing("l2")
    assert hands.sheet.rect().contains(hands.at("l2"))
    hands.sheet.show_thing("nothing")
    hands.sheet.fit()
    for key in ("r1", "r2", "r3", "s1"):
        assert hands.sheet.rect().contains(hands.at(key))


def test_select_all_and_another_document(hands: Hands, qtbot: object) -> None:
    changes: list[None] = []
    hands.sheet.selection_changed.connect(lambda: changes.append(None))
    hands.sheet.select_all()
    assert len(hands.sheet.selected_nodes) == 4
    assert len(hands.sheet.selected_links) == 3
    hands.sheet.select_all()
    assert len(changes) == 1
    hands.sheet.set_document(None)
    assert hands.sheet.selected_nodes == []
    hands.document.apply(edits.add_router(hands.plan, 0, 0))
    assert not hands.sheet.drawing.plan.nodes


def test_a_moved_frame_is_the_frame_read_anew(take: Callable[[Plan], Hands]) -> None:
    hands = take(quay_plan())
    hands.document.apply(edits.move(hands.plan, {"r1": (40, 50), "s1": (420, 200)}))
    moved = picture(hands)
    fresh = take(hands.plan)
    fresh.sheet.show_view(hands.sheet.view)
    assert picture(fresh) == moved


class Paintings(QObject):
    """Counts how often a widget is painted."""

    def __init__(self, widget: QWidget) -> None:
        super().__init__(widget)
        self.count = 0
        widget.installEventFilter(self)

    def eventFilter(self, _: QObject, event: QEvent) -> bool:
        self.count += event.type() == QEvent.Type.Paint
        return False


def test_all_that_changes_in_one_turn_is_painted_once(hands: Hands, qtbot: QtBot) -> None:
    sheet, plan = hands.sheet, hands.plan
    qtbot.waitUntil(lambda: not sheet._rest.isActive())
    QApplication.processEvents()
    paintings = Paintings(sheet)
    hands.document.apply(edits.try_costs(plan, "l1", 7, 7))
    hands.document.apply(edits.rename(plan, "r2", "Hoist"))
    sheet.set_reading(None)
    sheet.set_reading(OUTWARD)
    sheet.select(["r1"])
    sheet.light_path({"l1": 1})
    qtbot.waitUntil(lambda: paintings.count > 0)
    QApplication.processEvents()
    assert paintings.count == 1
    assert not sheet._rest.isActive()


def alike(one: QImage, other: QImage) -> bool:
    """Return whether two pictures differ at most by what rounding at a seam does."""
    pixels = [np.frombuffer(image.constBits(), np.uint8).astype(int) for image in (one, other)]
    return len(pixels[0]) == len(pixels[1]) and int(np.abs(pixels[0] - pixels[1]).max()) <= 8


def test_a_large_plan_is_painted_part_by_part(
    take: Callable[[Plan], Hands], monkeypatch: pytest.MonkeyPatch
) -> None:
    hands = take(quay_plan())
    hands.sheet.set_reading(OUTWARD)
    whole = picture(hands)
    monkeypatch.setattr(resting, "AT_ONCE", 10)
    hands.sheet.drawing.stale = True
    parts = 1
    picture(hands)
    while not hands.sheet.finished:
        parts += 1
        last = picture(hands)
    assert parts > 2
    assert alike(last, whole)


def test_pushing_an_unfinished_picture_finishes_it_in_its_new_place(
    hands: Hands, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(resting, "AT_ONCE", 10)
    hands.sheet.drawing.stale = True
    picture(hands)
    assert not hands.sheet.finished
    hands.sheet.show_view(hands.sheet.view.panned(60, -30))
    while not hands.sheet.finished:
        pushed = picture(hands)
    hands.sheet.drawing.stale = True
    monkeypatch.undo()
    assert alike(picture(hands), pushed)


def test_low_zoom_shows_the_selected_plate_large_enough_to_read(hands: Hands) -> None:
    hands.sheet.zoom_to(0.1)
    without = picture(hands)
    hands.sheet.select(["r3"])
    assert count(picture(hands), LIGHT.ink) > count(without, LIGHT.ink)
