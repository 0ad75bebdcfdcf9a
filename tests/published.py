"""Networks printed in standards and books, as plans. Each names its source."""

from __future__ import annotations

from netsketch.model import Link, Plan, Router, Segment, Settings, edits


def plan_of(links: str, segments: str = "", style: str = "ospf", alone: str = "") -> Plan:
    """Return a plan from "A-B 10" (both ways) and "A-B 10/25" (leaving A / leaving B),
    separated by commas; names in ``segments`` become segments, all others routers.

    The link between A and B has the id "A-B".
    """
    plan = Plan(Settings(cost_style=style))
    rails = set(segments.split())
    names: dict[str, None] = dict.fromkeys(alone.split())
    drawn: list[Link] = []
    for text in links.split(","):
        pair, costs = text.split()
        a, b = pair.split("-")
        out, _, back = costs.partition("/")
        names.update({a: None, b: None})
        drawn.append(
            Link(
                id=pair,
                source=a,
                target=b,
                cost=0 if a in rails else int(out),
                cost_back=0 if b in rails else int(back or out),
            )
        )
    nodes = [Segment(id=n, name=n) if n in rails else Router(id=n, name=n) for n in names]
    plan.apply(edits.add(plan, *nodes))
    plan.apply(edits.add(plan, *drawn))
    return plan


# RFC 2328, section 2.1.2, Figure 2. Stub networks and the host H1 are segments: a router's
# cost to reach one is the cost on its output side; leaving costs 0. The interface addresses
# Ia and Ib are advertised as stubs by the other end of the RT6-RT10 line.
RFC2328_FIGURE_2_LINKS = (
    "RT1-N1 3, RT1-N3 1, RT2-N2 3, RT2-N3 1, RT3-N4 2, RT3-N3 1, RT4-N3 1, RT7-N6 1,"
    "RT8-N6 1, RT8-N7 4, RT9-N9 1, RT9-N11 3, RT10-N6 1, RT10-N8 3, RT11-N8 2, RT11-N9 1,"
    "RT12-N9 1, RT12-N10 2, RT12-H1 10, RT3-RT6 8/6, RT4-RT5 8, RT5-RT6 7/6, RT5-RT7 6,"
    "RT6-RT10 7/5, RT6-Ib 7, RT10-Ia 5"
)
RFC2328_SEGMENTS = "N1 N2 N3 N4 N6 N7 N8 N9 N10 N11 H1 Ia Ib"
# The AS-external destinations, with the type 1 costs of Figure 2 (section 2.3).
RFC2328_EXTERNAL_LINKS = "RT5-N12 8, RT5-N13 8, RT5-N14 8, RT7-N12 2, RT7-N15 9"


def rfc2328_figure_2(externals: bool = False) -> Plan:
    """Return the autonomous system of RFC 2328, Figure 2."""
    if not externals:
        return plan_of(RFC2328_FIGURE_2_LINKS, RFC2328_SEGMENTS)
    return plan_of(
        f"{RFC2328_FIGURE_2_LINKS}, {RFC2328_EXTERNAL_LINKS}",
        f"{RFC2328_SEGMENTS} N12 N13 N14 N15",
    )


def rfc2328_area_1() -> Plan:
    """Return Area 1 of RFC 2328, Figure 6, with the summaries of Table 6 as segments that
    RT3 and RT4 reach at the advertised costs (section 3.4)."""
    return plan_of(
        "RT1-N1 3, RT1-N3 1, RT2-N2 3, RT2-N3 1, RT3-N4 2, RT3-N3 1, RT4-N3 1,"
        "RT3-Iab 20, RT4-Iab 27, RT3-N6 16, RT4-N6 15, RT3-N7 20, RT4-N7 19,"
        "RT3-N8 18, RT4-N8 18, RT3-N9to11H1 29, RT4-N9to11H1 36, RT3-RT5x 14, RT4-RT5x 8",
        "N1 N2 N3 N4 Iab N6 N7 N8 N9to11H1 RT5x",
    )


def rfc2328_backbone() -> Plan:
    """Return the backbone of RFC 2328, Figures 6 and 7: Table 5's routers with the virtual
    link RT10-RT11 through Area 2; RT7 and RT10 are not adjacent in it (section 3.4)."""
    return plan_of(
        "RT3-RT6 8/6, RT4-RT5 8, RT5-RT6 7/6, RT5-RT7 6, RT6-RT10 7/5, RT10-RT11 3/2,"
        "RT6-Ib 7, RT10-Ia 5",
        "Ia Ib",
    )


# RFC 8102, Figure 1 and Figure 7: remote alternates that protect against a node.
RFC8102_FIGURE_1 = "S-E 1, E-D1 1, E-R3 1, R3-D2 1, R3-R2 1, R2-R1 1, R1-N 1, N-S 1"
RFC8102_FIGURE_7 = (
    "S-E1 2, N-E2 2, R1-R2 2, S-E2 1, S-N 1, E1-E2 1, E1-D1 1, E1-R3 1, R3-D2 1, R3-R2 1, R1-N 1"
)
