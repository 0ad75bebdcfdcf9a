"""How long the sheet takes for a frame: ``python -m tests.benchmarks.sheet_frames [ROUTERS …]``.

Invented random geometric plans, 1.9 links for each router, in a 1600 x 1000 window on the
offscreen platform. Prints the median and the 95th percentile of each case in milliseconds.
A frame is everything from the change to the finished picture; "longest" is the longest
single event in it, which is what a person waits for before the window answers again.
"""

from __future__ import annotations

import os
import random
import sys
import time
from collections.abc import Callable, Iterator

import networkx as nx
from PySide6.QtCore import QPoint, QPointF
from PySide6.QtGui import QImage
from PySide6.QtWidgets import QApplication

from netsketch.model import Link, Plan, Router, edits
from netsketch.readings.reading import FirstHop, LinkMark, PlateMark, Reading, Travel, letter
from netsketch.session.document import Document
from netsketch.sheet import Sheet
from netsketch.sheet.gestures import Grab

REPEATS = 25


def geometric_plan(routers: int, seed: int = 7) -> Plan:
    """Return a random geometric plan with 1.9 links for each router."""
    chance = random.Random(seed)
    side = 150 * routers**0.5
    places = {i: (chance.uniform(0, side * 1.6), chance.uniform(0, side)) for i in range(routers)}
    graph = nx.random_geometric_graph(routers, 330, pos=places, seed=seed)
    nearest = sorted(graph.edges, key=lambda edge: _span(places, *edge))[: int(routers * 1.9)]
    plan = Plan()
    plan.apply(
        edits.add(
            plan,
            *(
                Router(id=f"r{i}", name=f"Node-{i}", site=f"Site {i % 60}", x=x, y=y)
                for i, (x, y) in places.items()
            ),
        )
    )
    links = (
        Link(
            id=f"l{k}",
            source=f"r{a}",
            target=f"r{b}",
            cost=chance.randint(1, 99),
            cost_back=chance.randint(1, 99) if k % 9 == 0 else 10,
            capacity_mbps=10 ** chance.randint(2, 5),
        )
        for k, (a, b) in enumerate(nearest)
    )
    plan.apply(edits.add(plan, *links))
    return plan


def _span(places: dict[int, tuple[float, float]], a: int, b: int) -> float:
    return (places[a][0] - places[b][0]) ** 2 + (places[a][1] - places[b][1]) ** 2


def tree_reading(plan: Plan, seed: int) -> Reading:
    """Return a reading that marks every plate and about half of the links."""
    chance = random.Random(seed)
    hops = tuple(FirstHop(letter(i), i % 7, f"l{i}", f"r{i}") for i in range(5))
    links = {
        key: LinkMark((Travel(chance.choice((1, -1)), "tree", (chance.randrange(5),)),))
        for key in chance.sample(plan.links.keys(), len(plan.links) // 2)
    }
    plates = {
        key: PlateMark("reached", tuple(sorted(chance.sample(range(5), 1 + (seed + i) % 2))), i)
        for i, key in enumerate(plan.nodes.keys())
    }
    return Reading("outward", ("r0",), "Routes", links, plates, hops)


def edit_cases(document: Document) -> Iterator[tuple[str, Callable[[], None]]]:
    """Yield each case of an edit that is not a move, made over and over."""
    plan, turn = document.plan, iter(range(10**9))
    link = plan.links.keys()[len(plan.links) // 2]

    def trial_change() -> None:
        document.apply(edits.toggle_down(plan, links=[link]))

    def cost_edit() -> None:
        document.apply(edits.set_costs(plan, link, 100 + next(turn), 7))

    def rename() -> None:
        document.apply(edits.rename(plan, "r5", f"Renamed-{next(turn)}"))

    def add_link() -> None:
        nodes = plan.nodes.keys()
        document.apply(edits.add_link(plan, nodes[1], nodes[100 + next(turn)]))

    def remove_node() -> None:
        document.apply(edits.remove(plan, [plan.nodes.keys()[len(plan.nodes) // 2]]))

    yield "trial change", trial_change
    yield "cost edit", cost_edit
    yield "rename", rename
    yield "add link", add_link
    yield "remove router", remove_node


def cases(sheet: Sheet, plan: Plan) -> Iterator[tuple[str, Callable[[], None]]]:
    """Yield each case: its name and what one frame of it does, painting aside."""
    readings = [tree_reading(plan, seed) for seed in range(4)]
    turn = iter(range(10**9))

    def pan() -> None:
        sheet.show_view(sheet.view.panned(7, 4 if next(turn) % 2 else -4))

    def zoom() -> None:
        sheet.show_view(sheet.view.zoomed(1.03, QPointF(800, 500)))

    def rest() -> None:
        sheet._rest.stop()
        sheet.drawing.stale = True

    def read() -> None:
        sheet._rest.stop()
        sheet.set_reading(readings[next(turn) % 4])

    for where, scale in (("fit", None), ("1:1", 1.0)):
        sheet.fit() if scale is None else sheet.zoom_to(scale)
        yield f"repaint {where}", rest
        yield f"reading switch {where}", read
        yield f"pan {where}", pan
        yield f"zoom {where}", zoom
        sheet.fit() if scale is None else sheet.zoom_to(scale)
        yield f"drag {where}", dragging(sheet)


def dragging(sheet: Sheet) -> Callable[[], None]:
    """Return one step of dragging a plate that lies near the middle."""
    nodes = sheet.drawing.frame.contents.nodes
    middle = sheet.view.to_sheet(QPointF(800, 500))
    node = int(((nodes.x - middle.x()) ** 2 + (nodes.y - middle.y()) ** 2).argmin())
    grab = Grab(sheet, QPointF(800, 500), node, adding=False)
    steps = iter(range(1, 10**9))

    def step() -> None:
        grab.move(QPointF(800 + 5 * next(steps), 500))

    return step


def timings(sheet: Sheet, step: Callable[[], None]) -> tuple[list[float], list[float]]:
    """Return the milliseconds of each frame and of its longest event, both sorted; the
    first two frames are not counted."""
    target = QImage(sheet.size(), QImage.Format.Format_ARGB32_Premultiplied)
    found = [_frame(sheet, target, step) for _ in range(REPEATS + 2)][2:]
    return sorted(map(sum, found)), sorted(map(max, found))


def _frame(sheet: Sheet, target: QImage, step: Callable[[], None]) -> list[float]:
    """Make a change and paint until the picture is finished; return the milliseconds of
    each event, the change being one with the first painting."""
    start, events = time.perf_counter(), []
    step()
    while True:
        sheet.render(target, QPoint())
        events.append((time.perf_counter() - start) * 1000)
        if sheet.finished:
            return events
        start = time.perf_counter()


def opening(plan: Plan) -> tuple[list[float], list[float]]:
    """Return the same for opening ``plan`` on new sheets."""
    frames = []
    for _ in range(7):
        sheet = Sheet()
        sheet.resize(1600, 1000)
        target = QImage(sheet.size(), QImage.Format.Format_ARGB32_Premultiplied)
        start = time.perf_counter()
        sheet.set_document(Document(plan))
        setting = (time.perf_counter() - start) * 1000
        sheet._rest.stop()
        frames.append([setting, *_frame(sheet, target, lambda: None)])
        sheet.set_document(None)
        sheet.deleteLater()
    return sorted(map(sum, frames)), sorted(map(max, frames))


def show(name: str, frames: list[float], longest: list[float]) -> None:
    """Print one line of the table."""
    cells = [found[int(len(found) * at)] for found in (frames, longest) for at in (0.5, 0.95)]
    print(f"  {name:24}" + "".join(f"{cell:8.1f}" for cell in cells))


def main(sizes: list[int]) -> None:
    """Print a table of every case for each number of routers."""
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
    application = QApplication.instance() or QApplication([])
    for size in sizes:
        plan = geometric_plan(size)
        print(f"{size:,} routers, {len(plan.links):,} links")
        print(f"  {'':24}{'median':>8}{'p95':>8}{'longest':>8}{'p95':>8}")
        show("open", *opening(plan))
        sheet, document = Sheet(), Document(plan)
        sheet.resize(1600, 1000)
        sheet.set_document(document)
        for name, step in cases(sheet, plan):
            show(name, *timings(sheet, step))
            sheet.cancel_gesture()
            sheet.drawing.drop()
        sheet.fit()
        sheet._rest.stop()
        for reading, words in ((None, ""), (tree_reading(plan, 1), " under a reading")):
            sheet.set_reading(reading)
            for name, step in edit_cases(document):
                show(name + words, *timings(sheet, step))
        sheet.deleteLater()
    application.processEvents()


if __name__ == "__main__":
    main([int(word) for word in sys.argv[1:]] or [1_000, 5_000])
