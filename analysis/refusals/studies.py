"""Every reason for which a choice, a design or an analysis is turned down."""

from collections.abc import Sequence

from analysis.refusals.sentence import Refusal, nearest_told, rows_told


class UnknownScale(Refusal):
    """A scale that does not exist."""

    def __init__(self, text: str) -> None:
        super().__init__(f"There is no scale “{text}”: choose none, log, sqrt, reciprocal, or power=L with a number L other than 0.")


class OutsideScale(Refusal):
    """Values that the chosen scale cannot take."""

    def __init__(self, response: str, scale: str, needs: str, rows: tuple[int, ...]) -> None:
        self.rows = rows
        super().__init__(
            f"The {scale} scale needs every “{response}” to be {needs}, and {rows_told(rows)} "
            f"{'is' if len(rows) == 1 else 'are'} not: choose another scale, or set those rows aside with a reason."
        )


class SpanOutOfReach(Refusal):
    """Values so far apart, or so close together, that their squares leave the range of double precision."""

    def __init__(self, response: str, scale: str) -> None:
        what = f"“{response}”" if scale == "none" else f"“{response}” on the {scale} scale"
        super().__init__(f"The numbers of {what} are too large or too small to be squared: use another unit or another scale.")


class UnknownChoice(Refusal):
    """A choice with a value that it does not offer."""

    def __init__(self, choice: str, value: object, offered: Sequence[str]) -> None:
        super().__init__(f"“{value}” is not offered for {choice}: choose {', '.join(offered[:-1])} or {offered[-1]}.")


class OutOfRange(Refusal):
    """A number given as a choice that lies outside what makes sense."""

    def __init__(self, choice: str, value: object, expected: str) -> None:
        super().__init__(f"{choice.capitalize()} is given as {value}: it must be {expected}.")


class RoleMissing(Refusal):
    """A role that no column has been given yet."""

    def __init__(self, role: str) -> None:
        super().__init__(f"No column has been chosen as the {role} yet: choose one.")


class SameColumnTwice(Refusal):
    """One column in two roles."""

    def __init__(self, column: str, first: str, second: str) -> None:
        super().__init__(f"Column “{column}” is given as {first} and as {second}: choose a different column for one of them.")


class NameTaken(Refusal):
    """A factor or block named like a line of the results."""

    def __init__(self, column: str) -> None:
        super().__init__(f"The results call something else “{column}”: give that column another name, such as “{column} 1”.")


class UnknownLevel(Refusal):
    """A level that its column does not hold."""

    def __init__(self, column: str, level: str, levels: Sequence[str]) -> None:
        super().__init__(f"Column “{column}” has no level “{level}”; {nearest_told(level, levels, 'its levels')}")


class LevelTwice(Refusal):
    """A level named twice among those to keep."""

    def __init__(self, column: str, level: str) -> None:
        super().__init__(f"Level “{level}” of column “{column}” is named twice among the levels to keep: name it once.")


class NoUsableRow(Refusal):
    """No row left that has a response and both levels."""

    def __init__(self, response: str, left_out: int) -> None:
        super().__init__(
            f"No row is left to analyse: all {left_out} rows lack a usable “{response}” or a level, or hold levels that are not kept."
        )


class OneLevel(Refusal):
    """A factor with a single level among the usable rows."""

    def __init__(self, column: str, level: str) -> None:
        super().__init__(
            f"Column “{column}” has only one level, “{level}”, among the usable rows, so there is nothing to compare: "
            f"choose another column as the factor, or keep more levels."
        )


class LevelForEveryRow(Refusal):
    """A factor whose every row is a level of its own."""

    def __init__(self, column: str, levels: int) -> None:
        super().__init__(
            f"Column “{column}” has a different level in each of its {levels} rows, like a label or a measurement: "
            f"choose a column whose levels repeat as the factor."
        )


class TooManyCells(Refusal):
    """A crossed layout with more cells than can be held or shown."""

    def __init__(self, row_factor: str, a: int, column_factor: str, b: int, most: int) -> None:
        super().__init__(
            f"“{row_factor}” has {a} levels and “{column_factor}” has {b}, which makes {a * b} cells where {most} can be "
            f"handled: one of them may be a label or a measurement, so choose another column or keep fewer levels."
        )


class ConstantResponse(Refusal):
    """A response that never varies."""

    def __init__(self, response: str, value: str, rows: int) -> None:
        super().__init__(
            f"“{response}” is {value} in all {rows} usable rows, so there is no variation to explain: choose another response."
        )


class TooFewObservations(Refusal):
    """Fewer than two observations more than the model has parameters."""

    def __init__(self, observations: int, parameters: int, model: str, units: bool) -> None:
        what = "units" if units else "observations"
        help_ = "bring more replicates, or choose the model without interaction." if model == "full" else "bring more replicates."
        super().__init__(
            f"There are {observations} usable {what} for {parameters} parameters of the model, and at least "
            f"{parameters + 2} are needed to judge what is chance: {help_}"
        )


class UnitInSeveralCells(Refusal):
    """A unit measured under more than one combination of the factors."""

    def __init__(self, column: str, label: str, rows: tuple[int, ...]) -> None:
        self.rows = rows
        super().__init__(
            f"Unit “{label}” of column “{column}” was measured under more than one combination ({rows_told(rows)}): that is a "
            f"repeated measurement, which needs another analysis; choose the column that names one independent unit, or none."
        )


class BlockIsFactor(Refusal):
    """A block that cannot be told apart from a factor."""

    def __init__(self, block: str, factor: str) -> None:
        super().__init__(
            f"Block “{block}” and factor “{factor}” go together level by level, so their effects cannot be told apart: "
            f"analyse without the block, or choose another block column."
        )


class FactorsGoTogether(Refusal):
    """Two factors that name the same grouping."""

    def __init__(self, row: str, column: str) -> None:
        super().__init__(
            f"Columns “{row}” and “{column}” go together level by level, so their effects cannot be told apart: choose another "
            f"column as one of the factors."
        )


class UnreadableChoice(Refusal):
    """A choice in the shell that cannot be read."""

    def __init__(self, what: str) -> None:
        super().__init__(f"The choices cannot be read: {what}; `python -m analysis --help` lists them.")


class TwoRoutesDisagree(Refusal):
    """A table that a second computation does not confirm."""

    def __init__(self, term: str) -> None:
        super().__init__(
            f"Two independent computations disagree on “{term}”, so the result is withheld: please report this table, since it "
            f"shows a fault in the program."
        )


class NotEstimable(Refusal):
    """A combination of cells that the layout does not determine."""

    def __init__(self, cells: Sequence[str]) -> None:
        super().__init__(
            f"The combination of {', '.join(cells[:6])} cannot be estimated, because the layout lacks observations that it needs: "
            f"choose filled cells that are connected."
        )


class NoBrowser(Refusal):
    """A picture asked for where no browser is installed that could draw it."""

    def __init__(self) -> None:
        super().__init__(
            "A picture needs a browser of the Chromium family (Chrome, Edge, Chromium, Brave) and none was found: let the set-up fetch one "
            "(python app --fetch-browser), or take figures with the camera above them, which is set to the same size and resolution."
        )


class TemplateUnusable(Refusal):
    """A presentation of the user's own that slides cannot be written on."""

    def __init__(self, why: str) -> None:
        self.why = why
        super().__init__(f"The template cannot be used because {why}: choose another .pptx file, or take the slides without a template.")


class ReasonMissing(Refusal):
    """A row set aside without a reason."""

    def __init__(self, row: int) -> None:
        super().__init__(f"Row {row} is to be set aside without a reason: say in a few words why it does not belong to the experiment.")


class LevelNameMissing(Refusal):
    """A level that is to be renamed to nothing."""

    def __init__(self, column: str, level: str) -> None:
        super().__init__(f"Level “{level}” of column “{column}” needs a name: write one, or leave the level out of the analysis.")


class UnknownRow(Refusal):
    """A row number under which the table holds no observation."""

    def __init__(self, text: str, first: int, last: int) -> None:
        super().__init__(
            f"“{text}” names no row of the table: write row numbers of the file, {first} to {last}, such as “{first}, {last}”."
        )
