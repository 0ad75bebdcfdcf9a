"""netsketch: plan the interior routing of a campus or wide-area network."""

__version__ = "0.1.0"
