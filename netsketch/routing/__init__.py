"""The shortest-path core: arrays, distances, incremental updates, next hops, paths."""

from netsketch.routing.allpairs import AllPairs, Cancelled, Update, distances_from, never
from netsketch.routing.flow import Sink, distances_to
from netsketch.routing.network import BLOCKED, Network, Structure, compile_plan
from netsketch.routing.routes import NextHop, Routes, ShareOfLink

__all__ = [
    "BLOCKED",
    "AllPairs",
    "Cancelled",
    "Network",
    "NextHop",
    "Routes",
    "ShareOfLink",
    "Sink",
    "Structure",
    "Update",
    "compile_plan",
    "distances_from",
    "distances_to",
    "never",
]
