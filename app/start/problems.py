"""Why a start cannot go on, in a sentence for the person at the terminal."""


class SetupProblem(Exception):
    """One sentence: what is missing or in the way, and what would help."""
