"""How many examples a property is tried on: few by default, 25 times as many with
``python -m pytest --hypothesis-profile=long``."""

from __future__ import annotations

from hypothesis import settings

LONG = "long"


def register() -> None:
    """Make the profile known; before any test is collected."""
    settings.register_profile(LONG, deadline=None)


def examples(few: int) -> settings:
    """Return settings for ``few`` examples, or many in the long run, without a deadline:
    the first example may have to compile the loops."""
    many = settings.get_current_profile_name() == LONG
    return settings(max_examples=few * (25 if many else 1), deadline=None)
