"""Who uses a link: the pairs in each direction, and at which cost they would not."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QComboBox, QListWidget, QListWidgetItem, QVBoxLayout, QWidget

from netsketch.model import Plan, Segment, edits, highest_cost
from netsketch.window.pages.page import label, short
from netsketch.window.step_plot import StepPlot

if TYPE_CHECKING:
    from netsketch.analysis.tipping import Tipping

MOST_LISTED = 500


def _pairs(number: int) -> str:
    return "1 pair" if number == 1 else f"{number:,} pairs"


class Usage(QWidget):
    """The part of the link page that answers from all pairs."""

    cost_picked = Signal(bool, int)
    """(back, cost): give the direction this cost in the trial."""
    pair_asked = Signal(str, str)

    def __init__(self) -> None:
        super().__init__()
        self._tipping: tuple[Tipping, Tipping] | None = None
        self._plan = Plan()
        self._link = ""
        self.direction = QComboBox()
        self.direction.setAccessibleName("Direction")
        self.direction.addItems(["", ""])
        self.count = label("", wrap=True)
        self.plot = StepPlot()
        self.plot.setToolTip("Click a cost to try it; arrow keys step from one to the next")
        self.at_cost = label("", "soft", wrap=True)
        self.pairs = QListWidget()
        self.pairs.setAccessibleName("Pairs")
        self.pairs.setToolTip("Pairs that use the link; a click shows the pair's way")
        column = QVBoxLayout(self)
        column.setContentsMargins(0, 0, 0, 0)
        for widget in (
            label("Pairs that use it", "heading"), self.direction, self.count, self.plot,
            self.at_cost, self.pairs,
        ):  # fmt: skip
            column.addWidget(widget)
        self.direction.currentIndexChanged.connect(self._show)
        self.plot.cost_hovered.connect(self._describe)
        self.plot.cost_picked.connect(self._pick)
        self.pairs.itemClicked.connect(self._ask_pair)
        self.pairs.itemActivated.connect(self._ask_pair)

    def show_waiting(self, plan: Plan, link: str) -> None:
        """Show that the answer about ``link`` is on its way."""
        self._tipping, self._plan = None, plan
        ends = [short(plan.nodes[end].label, 24) for end in plan.links[link].ends]
        self.direction.blockSignals(True)
        for index, words in enumerate((" to ".join(ends), " to ".join(reversed(ends)))):
            self.direction.setItemText(index, words)
        if link != self._link:
            self._link = link
            self.direction.setCurrentIndex(0)
        self.direction.blockSignals(False)
        self.count.setText("computing…")

    def show_tipping(self, tipping: tuple[Tipping, Tipping]) -> None:
        """Show the answer, out and back."""
        self._tipping = tipping
        self._show()

    def _show(self) -> None:
        if self._tipping is None or self._link not in self._plan.links:
            return
        back = self.direction.currentIndex() == 1
        found = self._tipping[1 if back else 0]
        costs = edits.costs_in_trial(self._plan, self._link)
        cost = costs[1 if back else 0]
        leaves_segment = isinstance(self._plan.nodes[found.tail], Segment)
        highest = highest_cost(self._plan.settings.cost_style)
        routers = len(found.routers)
        using, sharing = found.using(cost), found.sharing(cost)
        share = 100 * using / max(routers * (routers - 1), 1)
        shared = f", {sharing:,} of them shared with equal-cost ways" if sharing else ""
        self.count.setText(f"{_pairs(using)} at cost {cost}{shared}: {share:.3g} % of all pairs")
        steps = found.steps(highest)
        self.plot.setVisible(not leaves_segment)
        self.plot.show_steps(steps, found.using(highest + 1), highest, cost)
        self._describe(cost)
        self._list(found, cost)

    def _describe(self, cost: int) -> None:
        if self._tipping is None:
            return
        found = self._tipping[self.direction.currentIndex()]
        text = f"At cost {cost:,}: {_pairs(found.using(cost))}"
        if found.sharing(cost):
            leaving = found.pairs_at(cost)
            names = ", ".join(self._pair_name(pair) for pair in leaving[:3])
            more = f" and {len(leaving) - 3:,} more" if len(leaving) > 3 else ""
            text += f"; above it these leave: {names}{more}"
        self.at_cost.setText(text)

    def _pair_name(self, pair: tuple[str, str]) -> str:
        return " to ".join(short(self._plan.nodes[key].label, 20) for key in pair)

    def _list(self, found: Tipping, cost: int) -> None:
        self.pairs.clear()
        for pair in found.pairs_using(cost, MOST_LISTED):
            item = QListWidgetItem(self._pair_name(pair))
            item.setData(Qt.ItemDataRole.UserRole, pair)
            self.pairs.addItem(item)
        left = found.using(cost) - self.pairs.count()
        if left > 0:
            self.pairs.addItem(f"and {left:,} more")

    def _ask_pair(self, item: QListWidgetItem) -> None:
        pair = item.data(Qt.ItemDataRole.UserRole)
        if pair:
            self.pair_asked.emit(*pair)

    def _pick(self, cost: int) -> None:
        if self._tipping is not None:
            self.cost_picked.emit(self.direction.currentIndex() == 1, cost)
