"""What the answers hold for, and what to mind before a live network is changed."""

COMPUTES = (
    "Shortest paths of one link-state routing domain, with every equal-cost next hop, from the "
    "costs, states and links of the plan.",
    "A link carries traffic only when it and both its ends are up and both directions exist.",
    "A drained router and the networks only it serves are reached; nothing else is through it.",
)

DOES_NOT = (
    "No timers: what happens while routers still disagree is not shown.",
    "No area boundaries and no levels: the plan is one flat domain.",
    "No policy: no filters, no traffic engineering tunnels, no static or external routes.",
)

CAUTIONS = (
    "Networks carry emergency calls and safety systems. A plan that is out of date gives exact "
    "answers about a network that does not exist: compare it with the live network first.",
    "Follow the operator's change procedure, local codes and licensed practice; they come "
    "before anything shown here.",
    "Prepare the way back before the change, and check the result on the live routers after it.",
)


def as_html() -> str:
    """Return all of it for a dialog."""

    def part(title: str, lines: tuple[str, ...]) -> str:
        return f"<h3>{title}</h3><ul>{''.join(f'<li>{line}</li>' for line in lines)}</ul>"

    return (
        part("What netsketch computes", COMPUTES)
        + part("What it does not", DOES_NOT)
        + part("Cautions", CAUTIONS)
    )
