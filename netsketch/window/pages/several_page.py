"""The page for several things at once."""

from __future__ import annotations

from netsketch.model import Router, edits
from netsketch.window.pages.page import Page, button, label


class SeveralPage(Page):
    """Counts what is selected and acts on all of it."""

    def __init__(self) -> None:
        super().__init__()
        self._nodes: list[str] = []
        self._links: list[str] = []
        self.counts = label("", wrap=True)
        self.column.addWidget(self.counts)
        for text, tip, make in (
            ("Take down or bring up", "All of them in the trial (D)", self._toggle_down),
            ("Drain or return", "All the routers in the trial (R)", self._toggle_drained),
            ("Delete", "All of them, with the links that hang on them (Del)", self._delete),
        ):
            made = button(text, tip)
            made.clicked.connect(make)
            self.column.addWidget(made)
        self.column.addStretch(1)
        self.title.setText("Several things")

    def show_several(self, nodes: list[str], links: list[str]) -> None:
        """Show what is selected."""
        self._nodes, self._links = nodes, links
        routers = sum(isinstance(self.plan.nodes[key], Router) for key in nodes)
        parts = [
            (routers, "router"),
            (len(nodes) - routers, "segment"),
            (len(links), "link"),
        ]
        words = [edits.counted(number, word) for number, word in parts if number]
        self.counts.setText(", ".join(words) + " selected")

    def _toggle_down(self) -> None:
        self.propose(edits.toggle_down(self.plan, self._nodes, self._links))

    def _toggle_drained(self) -> None:
        if any(isinstance(self.plan.nodes[key], Router) for key in self._nodes):
            self.propose(edits.toggle_drained(self.plan, self._nodes))
        else:
            self.hint.emit("Only routers can be drained")

    def _delete(self) -> None:
        self.propose(edits.remove(self.plan, self._nodes, self._links))
