"""An open document: the plan, its trial, the edit history, its answers, background jobs."""

from netsketch.session.answers import Answers, Outward, Path
from netsketch.session.document import Document
from netsketch.session.jobs import Jobs

__all__ = ["Answers", "Document", "Jobs", "Outward", "Path"]
