"""Every reason for which a file that holds a study is turned down."""

from analysis.refusals.sentence import Refusal


class StudyFileDamaged(Refusal):
    """A study file that is not as it was written."""

    def __init__(self) -> None:
        super().__init__(
            "The study file is damaged or was changed by something other than Crossgrain, so its numbers cannot be vouched for: "
            "bring an earlier copy of it, or the table itself."
        )


class StudyFileNewer(Refusal):
    """A study file written by a later version."""

    def __init__(self, version: str) -> None:
        super().__init__(
            f"The study file was written by a newer Crossgrain ({version[:20]}) and may hold decisions that this one does not know: "
            "open it there, or bring the table itself."
        )


class StudyFileTooLarge(Refusal):
    """A study file that unpacks beyond the limit."""

    def __init__(self, limit: int) -> None:
        super().__init__(f"The study file unpacks to more than {limit // 2**20} MiB, which is the limit: bring the table itself.")


class StudyNotKept(Refusal):
    """An earlier study that is asked for and no longer there."""

    def __init__(self) -> None:
        super().__init__("The study of this address is not kept on this machine any longer: bring its table or its study file again.")
