"""Where plates, rails, links and tags lie."""

from __future__ import annotations

import math

import numpy as np
import pytest
from PySide6.QtCore import QPointF, QRectF

from netsketch.model import Link, Plan, Router, Segment, edits
from netsketch.readings.reading import LinkMark, Reading, Travel
from netsketch.sheet.contents import unit_for
from netsketch.sheet.frame import Frame, frame_of
from netsketch.sheet.hits import distances, link_at, node_at, rows_in
from netsketch.sheet.lettering import LONGEST, Lettering, flat
from netsketch.sheet.look import LIGHT
from tests.sheet.conftest import quay_plan

pytestmark = [pytest.mark.gui, pytest.mark.usefixtures("qapp")]


def framed(plan: Plan, reading: Reading | None = None) -> Frame:
    return frame_of(plan, reading, LIGHT, Lettering(), unit_for(plan))


def pair(*links: tuple[int, int], distance: float = 300) -> Plan:
    """Return two routers side by side with these links (costs out and back), drawn in
    turn from either end."""
    plan = Plan()
    ends = Router(id="a", name="A", x=0, y=0), Router(id="b", name="B", x=distance, y=0)
    plan.apply(edits.add(plan, *ends))
    for number, (cost, back) in enumerate(links):
        source, target = ("a", "b") if number % 2 == 0 else ("b", "a")
        link = Link(id=f"l{number}", source=source, target=target, cost=cost, cost_back=back)
        plan.apply(edits.add(plan, link))
    return plan


def shown(frame: Frame) -> list[str]:
    return [frame.tags.texts[row] for row in np.flatnonzero(frame.tag_fits)]


def test_a_link_runs_from_edge_to_edge() -> None:
    frame = framed(pair((10, 10)))
    (left, right), (start, end) = frame.lines.boxes, frame.lines.points[0, 1:3]
    assert start[0] == pytest.approx(left[2])
    assert end[0] == pytest.approx(right[0])
    assert start[1] == end[1] == 0


@pytest.mark.parametrize("count", [2, 3, 6])
def test_parallel_links_keep_apart_whichever_end_is_the_source(count: int) -> None:
    frame = framed(pair(*[(10, 10)] * count))
    middles = sorted(frame.lines.points[:, 1:3].mean(axis=1)[:, 1])
    assert np.diff(middles).min() >= 10
    assert sum(middles) == pytest.approx(0)


def test_links_drop_on_to_a_rail_at_right_angles() -> None:
    plan = Plan()
    places = {"a": (0, 0), "b": (260, 30), "c": (150, 300)}
    routers = [Router(id=key, name=key, x=x, y=y) for key, (x, y) in places.items()]
    plan.apply(edits.add(plan, Segment(id="s", name="LAN", x=150, y=160), *routers))
    for key in places:
        plan.apply(edits.add_link(plan, key, "s"))
    frame = framed(plan)
    bar = frame.lines.bars[frame.contents.nodes.row["s"]]
    assert bar[0] < 0
    assert bar[2] > 260
    assert np.abs(frame.lines.along[:, 0]).max() == 0
    assert frame.lines.points[:, 3, 1].min() >= bar[1]
    assert frame.lines.points[:, 3, 1].max() <= bar[3]


def test_a_member_far_away_does_not_stretch_the_rail() -> None:
    plan = Plan()
    far = Router(id="far", name="Far", x=5000, y=300)
    plan.apply(edits.add(plan, Segment(id="s", name="LAN", x=0, y=0), far))
    plan.apply(edits.add_link(plan, "far", "s"))
    frame = framed(plan)
    bar = frame.lines.bars[0]
    assert bar[2] < 100
    knee, end = frame.lines.points[0, 2:]
    assert knee[0] == end[0]
    assert bar[0] <= end[0] <= bar[2]


def test_equal_costs_stand_once_and_unequal_ones_at_their_ends() -> None:
    assert shown(framed(pair((10, 10)))) == ["10"]
    frame = framed(pair((10, 25)))
    assert shown(frame) == ["10", "25"]
    assert frame.tag_boxes[0, 0] < 100 < 200 < frame.tag_boxes[1, 0]


def test_the_end_at_a_segment_shows_no_cost() -> None:
    frame = framed(quay_plan())
    assert "0" not in shown(frame)
    assert "5" in shown(frame)


@pytest.mark.parametrize("costs", [(10, 10), (10, 16_000)])
def test_tags_keep_off_the_plates_and_bands_of_their_link(costs: tuple[int, int]) -> None:
    seen = 0
    for turn in np.radians(range(0, 360, 7)).tolist():
        for distance in range(40, 320, 30):
            plan = pair(costs, distance=distance)
            x, y = distance * math.cos(turn), distance * math.sin(turn)
            plan.apply(edits.move(plan, {"b": (x, y)}))
            frame = framed(plan)
            seen += int(frame.tag_fits.sum())
            for box in frame.tag_boxes[frame.tag_fits]:
                assert not any(overlap(box, plate) for plate in frame.lines.boxes), (x, y)
    assert seen > 200


def overlap(tag: np.ndarray, plate: np.ndarray) -> bool:
    """Return whether a tag touches a plate or the band along its lower edge."""
    left, top, right, bottom = tag
    across = left < plate[2] and plate[0] < right
    return bool(across and top < plate[3] + 17 and plate[1] < bottom)


def test_a_short_link_shows_only_what_fits() -> None:
    assert shown(framed(pair((10, 10), distance=70))) == []
    assert shown(framed(pair((1000, 2000), distance=120))) == []


def test_what_the_trial_changes_is_told_with_the_plans_cost() -> None:
    plan = pair((10, 10), distance=60)
    plan.apply(edits.try_costs(plan, "l0", 40, 40))
    frame = framed(plan)
    assert shown(frame) == ["10 → 40"]
    assert frame.tags.tried.all()


def test_a_reading_puts_its_own_text_into_the_tag() -> None:
    mark = LinkMark((Travel(1, "path", share=0.5),), text="50 %")
    reading = Reading("load", (), "Load", {"l0": mark})
    assert shown(framed(pair((10, 25)), reading)) == ["50 %"]


def test_places_in_degrees_are_drawn_at_a_size_that_reads() -> None:
    plan = pair((10, 10), distance=0.4)
    assert framed(plan).lines.length[0] > 80
    assert unit_for(quay_plan()) == 1
    assert unit_for(Plan()) == 1


@pytest.mark.parametrize(
    "name",
    [
        "x" * 10_000,
        "a\nb\tc\x00d",
        "\u202eabc",
        "مرفأ الشمال",
        "⚓🛳️👩‍🔧",
        "\ud800",
        "   ",
        "👨‍👩‍👧‍👦" * 900,
    ],
)
def test_odd_names_stay_on_a_plate_of_sensible_size(name: str) -> None:
    plan = pair((10, 10))
    plan.apply(edits.rename(plan, "a", name))
    frame = framed(plan)
    width = frame.lines.boxes[0, 2] - frame.lines.boxes[0, 0]
    assert 28 <= width <= 220
    text = frame.contents.nodes.names[0]
    assert len(text) <= LONGEST + 1
    assert not set(text) & set("\n\t\x00\u202e\ud800")


def test_flat_keeps_what_emoji_are_joined_with() -> None:
    assert flat("👩‍🔧") == "👩‍🔧"
    assert flat("two\nlines") == "two lines"


def test_hits_are_exact_for_plates_and_forgiving_for_lines() -> None:
    frame = framed(quay_plan())
    rows = frame.contents.nodes.row
    assert node_at(frame, QPointF(10, 5)) == rows["r1"]
    assert node_at(frame, QPointF(150, 100)) is None
    assert link_at(frame, QPointF(120, 4)) == frame.contents.links.row["l1"]
    assert link_at(frame, QPointF(120, 12)) is None


def test_distance_is_to_the_nearest_piece_of_a_line() -> None:
    line = np.array([[[0.0, 0.0], [10.0, 0.0], [10.0, 10.0]]])
    assert distances(line, np.array([13.0, 14.0])) == pytest.approx(5)
    assert distances(line, np.array([5.0, -2.0])) == pytest.approx(2)


def test_an_area_takes_plates_it_touches_and_links_it_holds() -> None:
    frame = framed(quay_plan())
    nodes, links = rows_in(frame, QRectF(QPointF(380, 60), QPointF(-10, -40)))
    assert [frame.contents.nodes.ids[row] for row in nodes] == ["r1", "r2"]
    assert [frame.contents.links.ids[row] for row in links] == ["l1"]


def test_only_what_can_be_seen_is_painted() -> None:
    frame = framed(quay_plan()).within(QRectF(-60, -40, 120, 80))
    assert np.flatnonzero(frame.nodes).tolist() == [0]
    assert [frame.contents.links.ids[row] for row in np.flatnonzero(frame.links)] == ["l1", "l2"]
