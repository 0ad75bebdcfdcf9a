"""Cost styles: which link costs a routing protocol can carry.

Sources: OSPF 1..65535 (RFC 2328, C.3 and the 16-bit field of A.4.2); wide IS-IS
1..16777214 (RFC 5305, 3: 2**24 - 1 is never used in route computation);
narrow IS-IS 1..63 (ISO/IEC 10589, six bits).
"""

from __future__ import annotations

from typing import Final

COST_RANGES: Final[dict[str, tuple[int, int]]] = {
    "ospf": (1, 65_535),
    "isis-wide": (1, 16_777_214),
    "isis-narrow": (1, 63),
}
"""Cost style -> lowest and highest cost a link end may have."""

DEFAULT_STYLE: Final = "ospf"


def highest_cost(style: str) -> int:
    """Return the cost of a link of last resort in this style (RFC 6987 for OSPF)."""
    return COST_RANGES[style][1]
