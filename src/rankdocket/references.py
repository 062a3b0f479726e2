"""The bibliography: the only place in the house where a source is spelled out.

A rule names the works it rests on by key; a report lists the works of the rules that ran, and no others.
"""

from dataclasses import dataclass
from types import MappingProxyType
from typing import Final


@dataclass(frozen=True, slots=True)
class Reference:
    """A work cited.

    Attributes
    ----------
    short
        As it stands in running text: "Kendall 1945".
    full
        As it stands in the list of references.
    """

    key: str
    short: str
    full: str


@dataclass(frozen=True, slots=True)
class Description:
    """What a rule says of itself in a methods section, so that a report can only describe what ran.

    Attributes
    ----------
    sentence
        Past tense, with named slots ``{draws}`` for numbers; no number is written into it.
    cites
        Keys of the works the rule rests on.
    """

    sentence: str
    cites: tuple[str, ...] = ()


def _catalogue(*works: Reference) -> MappingProxyType[str, Reference]:
    found = {work.key: work for work in works}
    if len(found) != len(works):
        raise ValueError("two references share a key")
    return MappingProxyType(found)


REFERENCES: Final = _catalogue(
    Reference(
        "altman1995",
        "Altman & Bland 1995",
        "Altman DG, Bland JM (1995). Absence of evidence is not evidence of absence. BMJ 311: 485.",
    ),
    Reference(
        "bonett2000",
        "Bonett & Wright 2000",
        "Bonett DG, Wright TA (2000). Sample size requirements for estimating Pearson, Kendall and Spearman "
        "correlations. Psychometrika 65: 23–28.",
    ),
    Reference(
        "clopper1934",
        "Clopper & Pearson 1934",
        "Clopper CJ, Pearson ES (1934). The use of confidence or fiducial limits illustrated in the case of the "
        "binomial. Biometrika 26: 404–413.",
    ),
    Reference(
        "diciccio2017",
        "DiCiccio & Romano 2017",
        "DiCiccio CJ, Romano JP (2017). Robust permutation tests for correlation and regression coefficients. "
        "Journal of the American Statistical Association 112: 1211–1220.",
    ),
    Reference(
        "david1951",
        "David et al. 1951",
        "David ST, Kendall MG, Stuart A (1951). Some questions of distribution in the theory of rank correlation. "
        "Biometrika 38: 131–140.",
    ),
    Reference(
        "dwass1957",
        "Dwass 1957",
        "Dwass M (1957). Modified randomization tests for nonparametric hypotheses. Annals of Mathematical "
        "Statistics 28: 181–187.",
    ),
    Reference(
        "gibbons1975",
        "Gibbons & Pratt 1975",
        "Gibbons JD, Pratt JW (1975). P-values: interpretation and methodology. The American Statistician 29: 20–25.",
    ),
    Reference(
        "greenland2016",
        "Greenland et al. 2016",
        "Greenland S, Senn SJ, Rothman KJ, Carlin JB, Poole C, Goodman SN, Altman DG (2016). Statistical tests, "
        "P values, confidence intervals, and power: a guide to misinterpretations. European Journal of "
        "Epidemiology 31: 337–350.",
    ),
    Reference(
        "holm1979",
        "Holm 1979",
        "Holm S (1979). A simple sequentially rejective multiple test procedure. Scandinavian Journal of "
        "Statistics 6: 65–70.",
    ),
    Reference(
        "kendall1938",
        "Kendall 1938",
        "Kendall MG (1938). A new measure of rank correlation. Biometrika 30: 81–93.",
    ),
    Reference(
        "kendall1939",
        "Kendall et al. 1939",
        "Kendall MG, Kendall SFH, Babington Smith B (1939). The distribution of Spearman’s coefficient of rank "
        "correlation in a universe in which all rankings occur an equal number of times. Biometrika 30: 251–273.",
    ),
    Reference(
        "kendall1945",
        "Kendall 1945",
        "Kendall MG (1945). The treatment of ties in ranking problems. Biometrika 33: 239–251.",
    ),
    Reference(
        "kruskal1958",
        "Kruskal 1958",
        "Kruskal WH (1958). Ordinal measures of association. Journal of the American Statistical Association 53: "
        "814–861.",
    ),
    Reference(
        "lugannani1980",
        "Lugannani & Rice 1980",
        "Lugannani R, Rice S (1980). Saddle point approximation for the distribution of the sum of independent random "
        "variables. Advances in Applied Probability 12: 475–490.",
    ),
    Reference(
        "mccullagh2014",
        "McCullagh 2014",
        "McCullagh P (2014). An asymptotic approximation for the permanent of a doubly stochastic matrix. Journal of "
        "Statistical Computation and Simulation 84: 404–414.",
    ),
    Reference(
        "neslehova2007",
        "Nešlehová 2007",
        "Nešlehová J (2007). On rank correlation measures for non-continuous random variables. Journal of "
        "Multivariate Analysis 98: 544–567.",
    ),
    Reference(
        "phipson2010",
        "Phipson & Smyth 2010",
        "Phipson B, Smyth GK (2010). Permutation p-values should never be zero: calculating exact p-values when "
        "permutations are randomly drawn. Statistical Applications in Genetics and Molecular Biology 9: article 39.",
    ),
    Reference(
        "pitman1937",
        "Pitman 1937",
        "Pitman EJG (1937). Significance tests which may be applied to samples from any populations. II. The "
        "correlation coefficient test. Supplement to the Journal of the Royal Statistical Society 4: 225–232.",
    ),
    Reference(
        "spearman1904",
        "Spearman 1904",
        "Spearman C (1904). The proof and measurement of association between two things. American Journal of "
        "Psychology 15: 72–101.",
    ),
    Reference(
        "student1921",
        "Student 1921",
        "Student (1921). An experimental determination of the probable error of Dr Spearman’s correlation "
        "coefficients. Biometrika 13: 263–282.",
    ),
    Reference(
        "vandewiel2001",
        "van de Wiel & Di Bucchianico 2001",
        "van de Wiel MA, Di Bucchianico A (2001). Fast computation of the exact null distribution of Spearman’s "
        "rho and Page’s L statistic for samples with and without ties. Journal of Statistical Planning and "
        "Inference 92: 133–145.",
    ),
)
"""Every work the program may cite, by key.  Titles, volumes and pages are from memory unless a comment says otherwise."""
