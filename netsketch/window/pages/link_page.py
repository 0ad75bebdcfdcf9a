"""The link page: ends, costs, capacity, delay, groups and state."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

from PySide6.QtWidgets import QCheckBox, QGridLayout, QHBoxLayout, QLineEdit, QPushButton

from netsketch.model import Link, PlanError, Segment, edits
from netsketch.model.checks import check_cost, quoted
from netsketch.window.literal import as_tip, on_button
from netsketch.window.pages.page import Page, button, form, label, line, short
from netsketch.window.pages.usage import Usage

if TYPE_CHECKING:
    from netsketch.analysis.tipping import Tipping


class LinkPage(Page):
    """Answers for one link."""

    def __init__(self) -> None:
        super().__init__()
        self._link = ""
        self.ends = [QPushButton(), QPushButton()]
        self.costs = [line("Cost out", ""), line("Cost back", "")]
        self.trial_costs = label("", "soft", wrap=True)
        self.try_button = button("Try", "Give the link these costs in the trial (Return)")
        self.set_button = button("Change the plan", "Give the link these costs in the plan")
        self.down = QCheckBox("Down")
        self.down.setToolTip("Down in the trial (D)")
        self.capacity = line("Capacity in Mbit/s", "Empty where it is not known")
        self.delay = line("Delay in ms", "Empty where it is not known")
        self.groups = line("Shared-risk groups", "Ids of the groups, separated by commas")
        self.usage = Usage()
        self._lay_out()
        self._connect()

    def _lay_out(self) -> None:
        grid = QGridLayout()
        grid.addWidget(label("Leaving", "soft"), 0, 0)
        grid.addWidget(label("Cost", "soft"), 0, 1)
        for row, (end, cost) in enumerate(zip(self.ends, self.costs, strict=True), start=1):
            end.setToolTip("Go to this end")
            grid.addWidget(end, row, 0)
            grid.addWidget(cost, row, 1)
        self.column.addLayout(grid)
        buttons = QHBoxLayout()
        buttons.addWidget(self.try_button)
        buttons.addWidget(self.set_button)
        buttons.addStretch(1)
        self.column.addLayout(buttons)
        self.column.addWidget(self.trial_costs)
        fields = form()
        fields.addRow("In the trial", self.down)
        fields.addRow("Capacity, Mbit/s", self.capacity)
        fields.addRow("Delay, ms", self.delay)
        fields.addRow("Shared risk", self.groups)
        self.column.addLayout(fields)
        self.column.addWidget(self.usage, 1)

    def _connect(self) -> None:
        for index, end in enumerate(self.ends):
            end.clicked.connect(partial(self._go_to_end, index))
        for cost in self.costs:
            cost.returnPressed.connect(self._try)
        self.try_button.clicked.connect(self._try)
        self.set_button.clicked.connect(self._set)
        self.down.clicked.connect(self._toggle_down)
        self.usage.cost_picked.connect(self._try_one)
        for field, change in (
            (self.capacity, self._change_capacity),
            (self.delay, self._change_delay),
            (self.groups, self._change_groups),
        ):
            field.editingFinished.connect(change)

    @property
    def link(self) -> Link:
        """The link that is shown."""
        return self.plan.links[self._link]

    def show_link(self, key: str) -> None:
        """Show a link."""
        self._link = key
        link, plan = self.link, self.plan
        self.title.setText(f"Link {short(key, 40)}")
        values = edits.costs_in_trial(plan, key)
        for end, button_, field, value in zip(
            link.ends, self.ends, self.costs, values, strict=True
        ):
            node = plan.nodes[end]
            is_segment = isinstance(node, Segment)
            button_.setText(on_button(short(node.label, 24)))
            field.setText("0" if is_segment else str(value))
            field.setEnabled(not is_segment)
            field.setToolTip(
                "Leaving a segment costs nothing"
                if is_segment
                else as_tip(f"Leaving {node.label[:60]}")
            )
        planned = link.cost, link.cost_back
        self.trial_costs.setText("" if values == planned else _was(planned))
        self.down.setChecked(not edits.is_up(plan, link=key))
        self.capacity.setText(_text(link.capacity_mbps))
        self.delay.setText(_text(link.delay_ms))
        self.groups.setText(", ".join(link.groups))

    def show_tipping(self, tipping: tuple[Tipping, Tipping] | None) -> None:
        """Show which pairs use the link; ``None`` while that is computed."""
        if tipping is None:
            self.usage.show_waiting(self.plan, self._link)
        else:
            self.usage.show_tipping(tipping)

    def _try_one(self, back: bool, cost: int) -> None:
        now = edits.costs_in_trial(self.plan, self._link)
        costs = (now[0], cost) if back else (cost, now[1])
        self.propose(edits.try_costs(self.plan, self._link, *costs))

    def _read_costs(self) -> tuple[int, int]:
        found = []
        for field in self.costs:
            text = field.text().strip()
            value: int | str = int(text) if text.isdecimal() and len(text) < 20 else text
            if field.isEnabled():
                check_cost(value, self._link, self.plan.settings.cost_style)
            found.append(int(value))
        return found[0], found[1]

    def _try(self) -> None:
        try:
            self.propose(edits.try_costs(self.plan, self._link, *self._read_costs()))
        except PlanError as error:
            self._refuse(error)

    def _set(self) -> None:
        try:
            self.propose(edits.set_costs(self.plan, self._link, *self._read_costs()))
        except PlanError as error:
            self._refuse(error)

    def _refuse(self, error: PlanError) -> None:
        self.hint.emit(str(error))
        self.show_link(self._link)

    def _toggle_down(self) -> None:
        self.propose(edits.toggle_down(self.plan, links=[self._link]))

    def _change_capacity(self) -> None:
        self._change_number(self.capacity, "capacity_mbps", "capacity")

    def _change_delay(self) -> None:
        self._change_number(self.delay, "delay_ms", "delay")

    def _change_number(self, field: QLineEdit, name: str, word: str) -> None:
        if self._link not in self.plan.links:
            return
        if field.text().strip() == _text(getattr(self.link, name)):
            return
        try:
            value = _number(field.text(), f"link {quoted(self._link)}: {word}")
        except PlanError as error:
            self._refuse(error)
            return
        changed = edits.replace(self.link, **{name: value})
        self.propose(edits.change(self.plan, [changed], f"change {word} of link {self._link}"))
        self.show_link(self._link)

    def _change_groups(self) -> None:
        if self._link not in self.plan.links:
            return
        wanted = dict.fromkeys(part.strip() for part in self.groups.text().split(","))
        wanted.pop("", None)
        self.propose(edits.set_groups(self.plan, self._link, tuple(wanted)))

    def _go_to_end(self, index: int) -> None:
        key = self.link.ends[index]
        kind = "segment" if isinstance(self.plan.nodes[key], Segment) else "router"
        self.focus_asked.emit((kind, key))


def _was(planned: tuple[int, int]) -> str:
    both = str(planned[0]) if planned[0] == planned[1] else f"{planned[0]} and {planned[1]}"
    return f"These costs are tried; the plan has {both}."


def _text(value: float | None) -> str:
    return "" if value is None else f"{value:.15g}"


def _number(text: str, what: str) -> int | float | None:
    text = text.strip()
    if not text:
        return None
    try:
        value = float(text)
    except ValueError:
        raise PlanError(f"{what}: {quoted(text)} is not a number") from None
    return int(value) if value.is_integer() and abs(value) < 1e15 else value
