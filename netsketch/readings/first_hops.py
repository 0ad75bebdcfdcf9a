"""First hops get letters and colours, in the order of their bits, so that one letter means
one first hop in the plan and in the trial over it."""

from __future__ import annotations

import numpy as np

from netsketch.readings.reading import FirstHop, letter
from netsketch.routing import Routes
from netsketch.routing.routes import Words

COLOURS = 7


class FirstHops:
    """The first hops that any of several tables of one router uses."""

    def __init__(self, *tables: Routes) -> None:
        routes = tables[0]
        self._words = np.bitwise_or.reduce([table.masks for table in tables]).copy()
        used = np.bitwise_or.reduce(self._words, axis=0)
        bits = [int(bit) for bit in _bits(used) if routes.next_hop_at(int(bit)).router]
        self._index = {bit: index for index, bit in enumerate(bits)}
        self._letters: dict[bytes, tuple[int, ...]] = {}
        hops = [routes.next_hop_at(bit) for bit in bits]
        self.all = tuple(
            FirstHop(letter(i), i % COLOURS, hop.link, hop.router or "")
            for i, hop in enumerate(hops)
        )

    def letters(self, mask: Words) -> tuple[int, ...]:
        """Return the indexes of the first hops in ``mask`` (W,). A segment attached to the
        router itself has none: it is no next hop (RFC 2328, 16.1.1)."""
        key = mask.tobytes()
        if key not in self._letters:
            places = (self._index.get(int(bit)) for bit in _bits(mask))
            self._letters[key] = tuple(place for place in places if place is not None)
        return self._letters[key]


def _bits(mask: Words) -> np.ndarray:
    return np.flatnonzero(np.unpackbits(mask.view(np.uint8), bitorder="little"))
