"""Every reason for which a table, a choice or a design is turned down, each in one sentence for the user."""


class Refusal(Exception):
    """A sentence for the user: what was found, where, and what would help."""
