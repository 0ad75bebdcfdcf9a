"""What was drawn: frozen values, the plan that holds them, edits and the trial."""

from netsketch.model.checks import PlanError, quoted
from netsketch.model.costs import COST_RANGES, highest_cost
from netsketch.model.edit import Add, Change, ChangeSettings, ChangeTrial, Edit, Remove, Step
from netsketch.model.items import (
    Demand,
    Item,
    KeptTrial,
    Link,
    Node,
    Router,
    Segment,
    Settings,
    SharedRiskGroup,
)
from netsketch.model.plan import ChangeSet, Plan
from netsketch.model.trial import (
    AddedLink,
    Drained,
    LinkCost,
    LinkState,
    NodeState,
    Trial,
    TrialChange,
)

__all__ = [
    "COST_RANGES",
    "Add",
    "AddedLink",
    "Change",
    "ChangeSet",
    "ChangeSettings",
    "ChangeTrial",
    "Demand",
    "Drained",
    "Edit",
    "Item",
    "KeptTrial",
    "Link",
    "LinkCost",
    "LinkState",
    "Node",
    "NodeState",
    "Plan",
    "PlanError",
    "Remove",
    "Router",
    "Segment",
    "Settings",
    "SharedRiskGroup",
    "Step",
    "Trial",
    "TrialChange",
    "highest_cost",
    "quoted",
]
