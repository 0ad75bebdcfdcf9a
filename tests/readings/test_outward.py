"""The Outward reading: letters, colours, tree links and bands."""

from __future__ import annotations

from netsketch.model import edits
from netsketch.readings import outward as readings
from netsketch.readings.reading import Reading, letter
from netsketch.routing import Routes, compile_plan
from tests.published import plan_of, rfc2328_figure_2


def outward(text: str, source: str, segments: str = "") -> Reading:
    network = compile_plan(plan_of(text, segments))
    return readings.outward(Routes(network, network.structure.vertex_of[source]), source)


def test_letters_count_on_after_z() -> None:
    assert [letter(i) for i in (0, 25, 26, 51, 52)] == ["A", "Z", "AA", "AZ", "BA"]


def test_each_first_hop_has_a_letter_and_equal_cost_plates_carry_both() -> None:
    reading = outward("a-b 1, a-c 1, b-d 1, c-d 1, d-e 1, b-c 5", "a")
    assert [(hop.letter, hop.link, hop.router) for hop in reading.first_hops] == [
        ("A", "a-b", "b"), ("B", "a-c", "c"),
    ]  # fmt: skip
    bands = {key: (mark.letters, mark.cost) for key, mark in reading.plates.items()}
    assert bands == {
        "a": ((), 0), "b": ((0,), 1), "c": ((1,), 1), "d": ((0, 1), 2), "e": ((0, 1), 3),
    }  # fmt: skip
    assert reading.plates["a"].role == "focus"
    assert "b-c" not in reading.links, "links outside the tree are not named"
    travels = {key: mark.travels[0] for key, mark in reading.links.items()}
    assert travels["b-d"].letters == (0,)
    assert travels["d-e"].letters == (0, 1)
    assert {travel.direction for travel in travels.values()} == {1}


def test_direction_is_that_of_travel() -> None:
    reading = outward("b-a 1, c-b 1", "a")
    assert reading.links["b-a"].travels[0].direction == -1


def test_parallel_links_are_first_hops_of_their_own() -> None:
    plan = plan_of("a-b 1")
    plan.apply(edits.add_link(plan, "a", "b", 1))
    network = compile_plan(plan)
    reading = readings.outward(Routes(network, 0), "a")
    assert [hop.letter for hop in reading.first_hops] == ["A", "B"]
    assert reading.plates["b"].letters == (0, 1)


def test_an_attached_segment_is_no_next_hop_but_the_routers_beyond_are() -> None:
    """RFC 2328, 16.1.1, on Figure 2: from RT1 over N3 the next hops are RT2, RT3, RT4."""
    plan = rfc2328_figure_2()
    network = compile_plan(plan)
    reading = readings.outward(Routes(network, network.structure.vertex_of["RT1"]), "RT1")
    assert {hop.router for hop in reading.first_hops} == {"RT2", "RT3", "RT4"}
    assert reading.plates["N3"].letters == ()
    names = [hop.router for hop in reading.first_hops]
    assert {names[i] for i in reading.links["RT1-N3"].travels[0].letters} == set(names)
    assert [names[i] for i in reading.links["RT3-N3"].travels[0].letters] == ["RT3"]


def test_colours_repeat_after_seven_letters_do_not() -> None:
    reading = outward(", ".join(f"hub-{name} 1" for name in "abcdefghij"), "hub")
    assert [hop.colour for hop in reading.first_hops] == [0, 1, 2, 3, 4, 5, 6, 0, 1, 2]
    assert len({hop.letter for hop in reading.first_hops}) == 10


def test_cut_off_plates_say_so() -> None:
    reading = outward("a-b 1, c-d 1", "a")
    assert reading.plates["c"].role == "cut off"
    assert reading.plates["c"].cost is None
