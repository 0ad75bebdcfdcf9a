"""Property runs: short by default, long with ``--hypothesis-profile=long``."""

from hypothesis import settings

settings.register_profile("long", max_examples=1000, deadline=None)
