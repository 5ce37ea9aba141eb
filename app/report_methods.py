"""The methods of a report in sentences: question, design, data left out, model, checks, comparisons, software; blanks for the user."""

from collections.abc import Iterator

from analysis.findings import Findings
from analysis.holding import permutation
from analysis.rounding import percent, shortest
from app import how, speaker, tabled, words
from app.report_parts import Part, Text, to_fill_in

BEYOND = "detection limit"  # in the reason of a value that is one
MISSING = ("no value", "missing", "empty", "is missing")


def methods(findings: Findings) -> tuple[Part, ...]:
    """Return the parts of the methods."""
    return (
        Part("Question and factors", (*_question(findings),)),
        Part("Design", (*_design(findings),)),
        Part("Data", (*_data(findings),)),
        Part("Analysis", (*_analysis(findings),)),
        Part("Software", (_software(findings),)),
    )


def _question(findings: Findings) -> Iterator[Text]:
    first, *others = findings.answers
    response, study = words.response_in_units(findings), findings.study
    asked = " ".join((first.question, *(answer.question for answer in others)))
    yield Text(
        f"The questions were: {asked} The response was {response}. "
        f"{to_fill_in('the hypotheses, whether this response was the primary one, and what of this analysis was planned beforehand')}",
        (1,),
    )
    control = ", ".join(f"{study_level} of {factor}" for factor, study_level in study.control.items())
    yield Text(
        f"The factors were {tabled.factors_with_levels(findings)}. "
        f"{f'The control was {control}.' if control else to_fill_in('the control level of each factor, if there is one')} "
        f"{to_fill_in('what each level stands for, its amount and unit, and why these levels were chosen')}",
        (2,),
    )


def _design(findings: Findings) -> Iterator[Text]:
    study, design = findings.study, findings.design
    if study.unit is None:
        yield Text(
            f"Each row was taken as one independent unit. {to_fill_in('what the experimental unit is, and that no unit has several rows')}",
            (3,),
        )
    else:
        units = f"{design['observations']} readings of {len(findings.observations)} units"
        yield Text(f"The experimental unit was {study.unit}: {units}, averaged within each unit before the analysis.", (3,))
    blocks = f"Blocks of {study.block} were allowed for as an additive term." if study.block else "No block was allowed for."
    how_assigned = "how units were assigned to combinations; whether a factor was applied to larger plots or repeated on one unit"
    yield Text(f"{blocks} {to_fill_in(how_assigned)}", (4,))
    yield Text(
        f"Analysed were {tabled.numbers(findings)}. {to_fill_in('the numbers planned, and how they were decided')}",
        (5,),
    )
    yield Text(to_fill_in("who was blind to the treatments, and in which order units were measured"), (29,))


def _data(findings: Findings) -> Iterator[Text]:
    study, left_out = findings.study, findings.design["left_out"]
    aside = len(study.set_aside)
    chosen = (
        f"{words.counted(aside, 'row')} of the file {'was' if aside == 1 else 'were'} set aside by hand, with the reasons below."
        if aside
        else ("No row was set aside by hand.")
    )
    yield Text(f"{chosen} {to_fill_in('the rules by which units were included or excluded, and whether they were set beforehand')}", (6,))
    named = "; ".join(f"row {entry['row']}: {entry['why']}" for entry in left_out[: speaker.ROWS_TOLD * 5])
    rest = len(left_out) - speaker.ROWS_TOLD * 5
    more = f"; and {rest} more, listed in the workbook" if rest > 0 else ""
    told = f"Left out were {words.counted(len(left_out), 'row')}: {named}{more}." if left_out else "No row was left out."
    yield Text(f"{words.reckoning(findings.design['observations'], len(left_out))} {told}", (7,))
    beyond = [entry for entry in left_out if BEYOND in entry["why"]]
    missing = [entry for entry in left_out if entry not in beyond and entry["row"] not in study.set_aside]
    yield Text(
        f"{_of(missing, 'row')} left out for want of a usable entry; missing values were not filled in."
        if missing
        else "No value was missing.",
        (8,),
    )
    yield Text(
        f"{_of(beyond, 'value')} beyond a detection limit and left out; none was replaced by a number."
        if beyond
        else "No value was beyond a detection limit.",
        (9,),
    )


def _of(entries: list[dict[str, object]], thing: str) -> str:
    return f"{words.counted(len(entries), thing)} {'was' if len(entries) == 1 else 'were'}"


def _analysis(findings: Findings) -> Iterator[Text]:
    study, fit = findings.study, findings.fit
    scale = words.scale_name(study.scale).lower()
    why = "" if study.scale == "none" else f" {to_fill_in('why this scale')}"
    means = "means are told as they were measured" if study.scale == "none" else "means and intervals are told back in original units"
    yield Text(f"The response was analysed on this scale: {scale}; {means}.{why}", (11,))
    interaction = "with" if findings.model.interaction else "without"
    yield Text(
        f"A linear model was fitted {interaction} the interaction, both factors fixed{', the block additive' if study.block else ''}, "
        f"no covariate, effects summing to zero: {how.model(findings)}",
        (12,),
    )
    yield Text(
        f"{speaker.table_words(findings)} sums of squares were used. {findings.used['why']} All tests and intervals rest on the residual "
        f"mean square with {fit['residual_df']} degrees of freedom.",
        (13,),
    )
    yield Text(
        f"Tests were two-sided at a level of {shortest(round(1 - study.confidence, 10))}; intervals have a confidence of "
        f"{percent(study.confidence)}. p-values are given exactly, down to 0.001; numbers carry the digits that their standard errors "
        "support.",
        (23, 27),
    )
    yield Text(
        f"Comparisons were adjusted within each family: {words.adjusted_by(findings)}. A family is all comparisons of one factor's means, "
        "or all inside one level of the other factor. F tests inside the levels of the other factor use the pooled error and Holm's "
        f"adjustment over the levels. {_matters(findings)} {to_fill_in('which comparisons were planned; all others are post hoc')}",
        (21,),
    )
    yield Text(
        "Assumptions were checked on the residuals of the model: equal spread over cells (Brown-Forsythe, Levene, Bartlett), shape "
        "(Shapiro-Wilk, normal quantiles), additivity, influence (studentised residuals with Bonferroni, Cook's distance), and the power "
        "transformation that suits the model best (Box-Cox). Values were not excluded on the strength of a check.",
        (14, 10),
    )


def _matters(findings: Findings) -> str:
    matters = findings.choices.matters
    if matters is None:
        return "No smallest difference that matters was given, so a difference that is not shown is left undecided."
    unit = f" {findings.observed.unit}" if findings.observed.unit else ""
    return f"The smallest difference that matters was set at {shortest(matters)}{unit}; intervals were read against it."


def _software(findings: Findings) -> Text:
    versions = ", ".join(f"{name} {version}" for name, version in findings.versions.items())
    return Text(
        f"Computed with {versions}; random permutations use the seed {permutation.SEED}. The data as analysed stand in the workbook, and a "
        f"script recomputes tables, means and comparisons from them. {to_fill_in('where data and script can be had')}",
        (30,),
    )
