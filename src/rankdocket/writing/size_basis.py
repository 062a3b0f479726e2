"""What a plan of rows rests on: the formula with its source, and the sentences that its reader must see."""

from rankdocket.analysis.sizing import ShowAnswer, ShowQuestion
from rankdocket.document.model import Block, CaveatBlock, Paragraph, Prose, Verbatim
from rankdocket.document.prose import joined, only, prose
from rankdocket.references import Description
from rankdocket.stats.guarded_width import GUARDED_WIDTH
from rankdocket.stats.sample_size import SAMPLE_SIZE
from rankdocket.stats.tied_target import TIED_TARGET
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import sentences
from rankdocket.writing.size_words import Told

ROWS_FORMULA = "n = 3 + ((z(alpha) + z(power) · √(1 + rho²/2)) / atanh(rho))²"
WIDTH_FORMULA = "width = factor · [tanh(a + h) − tanh(a − h)],  a = atanh(rho),  h = z(level) · √((1 + rho²/2)/(n − 3))"


def basis(story: Told) -> tuple[Block, ...]:
    """Return the methods text of a plan and its formula."""
    shows = isinstance(story.answer, ShowAnswer)
    question = story.answer.question
    shared = isinstance(question, ShowQuestion) and question.questions > 1
    parts = [_described(SAMPLE_SIZE if shows else GUARDED_WIDTH, *(("dunn1961",) if shared else ()))]
    if question.rows.has_ties:
        parts.append(_described(TIED_TARGET))
    return (Paragraph(sentences(*parts)), Verbatim(ROWS_FORMULA if shows else WIDTH_FORMULA))


def caveats(story: Told) -> tuple[CaveatBlock, ...]:
    """Return the caveats of a plan."""
    few = (
        (("few-rows", _few_rows(story)),) if isinstance(story.answer, ShowAnswer) and story.answer.is_overstated else ()
    )
    keyed = (*few, ("shape", _shape(story)), ("ties", _ties(story)), ("planned", _planned(story)))
    return tuple(CaveatBlock(key, number, words) for number, (key, words) in enumerate(keyed, 1))


def _few_rows(story: Told) -> Prose:
    return prose(
        "With so few rows, fewer than {least}, the formula tends to overstate the power; the exact test can have less. A "
        "few rows more make up for it.",
        least=story.numbers.whole("formula_from"),
    )


def _shape(story: Told) -> Prose:
    if isinstance(story.answer, ShowAnswer):
        return only(
            "The plan holds for normal-type dependence between rows that do not depend on one another. Where the spread "
            "of one variable changes with the other, or rows are repeated or in time order, the power is another."
        )
    return only(
        "The plan holds for normal-type dependence between rows that do not depend on one another. The width is a "
        "mean: about half of all samples give a wider interval, and other shapes of dependence another mean."
    )


def _ties(story: Told) -> Prose:
    rows = story.answer.question.rows
    if not rows.has_ties:
        return only("No ties are expected. Ties lower the rho that can be found, and more rows are then needed.")
    if isinstance(story.answer, ShowAnswer):
        return only(
            "The ties were stated in advance. If fewer distinct values arrive, or one value holds most rows, rho "
            "comes out smaller and the smallest attainable p larger than planned."
        )
    return only(
        "The ties were stated in advance, and the factor was simulated without ties: with few distinct values and rho "
        "near perfect order the interval is wider than planned."
    )


def _planned(story: Told) -> Prose:
    if isinstance(story.answer, ShowAnswer):
        return only(
            "The rho is one to plan with: the smallest that matters, not one hoped for. Put in the estimate once the "
            "data are there, and the power would only repeat the p-value."
        )
    return only("The rho is one to plan with. The nearer it comes to perfect order, the narrower the interval.")


def _described(rule: Description, *more: str) -> Prose:
    return joined((only(rule.sentence.removesuffix(".")), prose("{works}.", works=cite(*rule.cites, *more))))
