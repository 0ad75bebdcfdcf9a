"""``python -m netsketch``."""

from netsketch.start import run

run()
