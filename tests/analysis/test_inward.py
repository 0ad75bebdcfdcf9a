"""The sink tree's table equals what every source's own table says."""

from __future__ import annotations

from hypothesis import given

from netsketch.analysis import forwarding_table
from netsketch.analysis.inward import demand_on_arcs, inward_table
from netsketch.model import Plan
from netsketch.routing import Routes, Sink, compile_plan
from tests import strategies
from tests.examples import examples
from tests.published import rfc2328_figure_2


@examples(60)
@given(plan=strategies.plans(max_nodes=7, with_trial=False))
def test_ways_in_are_the_ways_out_of_the_others(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    tables = {
        s.vertex_ids[source]: {row.to: row for row in forwarding_table(Routes(network, source))}
        for source in range(s.routers)
    }
    for target, v in s.vertex_of.items():
        rows = inward_table(Sink(network, v))
        assert [row.to for row in rows] == sorted(set(tables) - {target})
        for row in rows:
            own = tables[row.to][target]
            assert (row.cost, row.hops) == (own.cost, own.hops)
            assert set(row.next_hops) == set(own.next_hops)
            assert (row.delay_ms is None) == (own.delay_ms is None)
            if row.delay_ms and own.delay_ms:
                for mine, other in zip(row.delay_ms, own.delay_ms, strict=True):
                    assert abs(mine - other) < 1e-9 * max(1.0, other)


@examples(40)
@given(plan=strategies.plans(max_nodes=7, with_trial=False))
def test_demand_arrives_whole(plan: Plan) -> None:
    network = compile_plan(plan)
    s = network.structure
    for target, v in s.vertex_of.items():
        sink = Sink(network, v)
        offered = sum(
            d.mbps
            for d in plan.demands
            if d.target == target and int(sink.row[s.vertex_of[d.source]]) != sink.unreached
        )
        arrived = demand_on_arcs(sink, plan.demands)[s.head == v].sum()
        assert abs(arrived - offered) < 1e-9 * max(1.0, offered)


def test_rfc2328_ways_to_n6() -> None:
    """RFC 2328, Table 2, read backwards: RT6 reaches N6 by RT10 at 8."""
    network = compile_plan(rfc2328_figure_2())
    rows = {row.to: row for row in inward_table(Sink(network, network.structure.vertex_of["N6"]))}
    assert rows["RT6"].cost == 8
    assert [hop.router for hop in rows["RT6"].next_hops] == ["RT10"]
    assert [hop.router for hop in rows["RT7"].next_hops] == [None]
