"""An adjustment to plain data: what alpha bounds, and the permutations of a family that was adjusted together."""

from fractions import Fraction

from rankdocket.analysis.family import error_rate_of
from rankdocket.analysis.filing import filed
from rankdocket.analysis.max_t_result import MemberMaxT
from rankdocket.analysis.results import Analysis
from rankdocket.canonical import Plain


def adjustment_to_plain(analysis: Analysis) -> dict[str, Plain]:
    """Return what stands below ``inference``: the error rate and, where there is one, the family’s maxT."""
    plain: dict[str, Plain] = {"error_rate": error_rate_of(analysis.spec)}
    family = analysis.max_t
    if family is not None:
        drawn: dict[str, Plain] = {"stream": list(family.stream)} if family.stream else {}
        plain["max_t"] = {
            "variable": family.variable,
            "method": family.method,
            "of": str(family.of),
            "held_back": list(family.held_back),
            **drawn,
        }
    return plain


def member_to_plain(member: MemberMaxT | None, p_adjusted: Fraction | None) -> dict[str, Plain]:
    """Return what stands below ``finding``: the counts from which an adjusted p comes, and its error when drawn.

    ``below_own_p`` says that the drawn share lay below the association’s own p, which stands in its place.
    """
    if member is None or p_adjusted is None:
        return {}
    low, high = member.ends
    drawn: dict[str, Plain] = {} if low == high else {"p_low": filed(low), "p_high": filed(high)}
    return {
        "max_t": {
            "count": str(member.hits),
            "own_count": str(member.own_hits),
            "of": str(member.of),
            "share": filed(member.share),
            "below_own_p": member.share < p_adjusted,
            **drawn,
        }
    }
