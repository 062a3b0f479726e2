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
        "ayer1955",
        "Ayer et al. 1955",
        "Ayer M, Brunk HD, Ewing GM, Reid WT, Silverman E (1955). An empirical distribution function for "
        "sampling with incomplete information. Annals of Mathematical Statistics 26: 641–647.",
    ),
    Reference(
        "bareiss1968",
        "Bareiss 1968",
        "Bareiss EH (1968). Sylvester’s identity and multistep integer-preserving Gaussian elimination. "
        "Mathematics of Computation 22: 565–578.",
    ),
    Reference(
        "bartels1982",
        "Bartels 1982",
        "Bartels R (1982). The rank version of von Neumann’s ratio test for randomness. Journal of the American "
        "Statistical Association 77: 40–46.",
    ),
    Reference(
        "benjamini1995",
        "Benjamini & Hochberg 1995",
        "Benjamini Y, Hochberg Y (1995). Controlling the false discovery rate: a practical and powerful "
        "approach to multiple testing. Journal of the Royal Statistical Society B 57: 289–300.",
    ),
    Reference(
        "benjamini2001",
        "Benjamini & Yekutieli 2001",
        "Benjamini Y, Yekutieli D (2001). The control of the false discovery rate in multiple testing under "
        "dependency. Annals of Statistics 29: 1165–1188.",
    ),
    Reference(
        "bonett2000",
        "Bonett & Wright 2000",
        "Bonett DG, Wright TA (2000). Sample size requirements for estimating Pearson, Kendall and Spearman "
        "correlations. Psychometrika 65: 23–28.",
    ),
    Reference(
        "chatterjee2021",
        "Chatterjee 2021",
        "Chatterjee S (2021). A new coefficient of correlation. Journal of the American Statistical Association "
        "116: 2009–2022.",
    ),
    Reference(
        "clopper1934",
        "Clopper & Pearson 1934",
        "Clopper CJ, Pearson ES (1934). The use of confidence or fiducial limits illustrated in the case of the "
        "binomial. Biometrika 26: 404–413.",
    ),
    Reference(
        "croux2010",
        "Croux & Dehon 2010",
        "Croux C, Dehon C (2010). Influence functions of the Spearman and Kendall correlation measures. Statistical "
        "Methods and Applications 19: 497–515.",
    ),
    Reference(
        "devlin1975",
        "Devlin et al. 1975",
        "Devlin SJ, Gnanadesikan R, Kettenring JR (1975). Robust estimation and outlier detection with "
        "correlation coefficients. Biometrika 62: 531–545.",
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
        "dunn1961",
        "Dunn 1961",
        "Dunn OJ (1961). Multiple comparisons among means. Journal of the American Statistical Association 56: 52–64.",
    ),
    Reference(
        "dunn1969",
        "Dunn & Clark 1969",
        "Dunn OJ, Clark V (1969). Correlation coefficients measured on the same individuals. Journal of the "
        "American Statistical Association 64: 366–377.",
    ),
    Reference(
        "dwass1957",
        "Dwass 1957",
        "Dwass M (1957). Modified randomization tests for nonparametric hypotheses. Annals of Mathematical "
        "Statistics 28: 181–187.",
    ),
    Reference(
        "efron1987",
        "Efron 1987",
        "Efron B (1987). Better bootstrap confidence intervals. Journal of the American Statistical Association 82: "
        "171–185.",
    ),
    Reference(
        "fieller1957",
        "Fieller et al. 1957",
        "Fieller EC, Hartley HO, Pearson ES (1957). Tests for rank correlation coefficients. I. Biometrika 44: 470–481.",
    ),
    Reference(
        "fieller1961",
        "Fieller & Pearson 1961",
        "Fieller EC, Pearson ES (1961). Tests for rank correlation coefficients. II. Biometrika 48: 29–40.",
    ),
    Reference(
        "fisher1921",
        "Fisher 1921",
        "Fisher RA (1921). On the “probable error” of a coefficient of correlation deduced from a small sample. Metron "
        "1: 3–32.",
    ),
    Reference(
        "ge2003",
        "Ge et al. 2003",
        "Ge Y, Dudoit S, Speed TP (2003). Resampling-based multiple testing for microarray data analysis. "
        "Test 12: 1–77.",
    ),
    Reference(
        "gibbons1975",
        "Gibbons & Pratt 1975",
        "Gibbons JD, Pratt JW (1975). P-values: interpretation and methodology. The American Statistician 29: 20–25.",
    ),
    Reference(
        "goertzen2010",
        "Goertzen & Cribbie 2010",
        "Goertzen JR, Cribbie RA (2010). Detecting a lack of association: an equivalence testing approach. "
        "British Journal of Mathematical and Statistical Psychology 63: 527–537.",
    ),
    Reference(
        "greenland2016",
        "Greenland et al. 2016",
        "Greenland S, Senn SJ, Rothman KJ, Carlin JB, Poole C, Goodman SN, Altman DG (2016). Statistical tests, "
        "P values, confidence intervals, and power: a guide to misinterpretations. European Journal of "
        "Epidemiology 31: 337–350.",
    ),
    Reference(
        "hochberg1988",
        "Hochberg 1988",
        "Hochberg Y (1988). A sharper Bonferroni procedure for multiple tests of significance. Biometrika 75: 800–802.",
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
        "kendall1942",
        "Kendall 1942",
        "Kendall MG (1942). Partial rank correlation. Biometrika 32: 277–283.",
    ),
    Reference(
        "kendall1945",
        "Kendall 1945",
        "Kendall MG (1945). The treatment of ties in ranking problems. Biometrika 33: 239–251.",
    ),
    Reference(
        "korn1984",
        "Korn 1984",
        "Korn EL (1984). The ranges of limiting values of some partial correlations under conditional "
        "independence. The American Statistician 38: 61–62.",
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
        "mantel1967",
        "Mantel 1967",
        "Mantel N (1967). The detection of disease clustering and a generalized regression approach. Cancer "
        "Research 27: 209–220.",
    ),
    Reference(
        "mccullagh2014",
        "McCullagh 2014",
        "McCullagh P (2014). An asymptotic approximation for the permanent of a doubly stochastic matrix. Journal of "
        "Statistical Computation and Simulation 84: 404–414.",
    ),
    Reference(
        "meng1992",
        "Meng et al. 1992",
        "Meng X-L, Rosenthal R, Rubin DB (1992). Comparing correlated correlation coefficients. Psychological "
        "Bulletin 111: 172–175.",
    ),
    Reference(
        "murphy1999",
        "Murphy & Myors 1999",
        "Murphy KR, Myors B (1999). Testing the hypothesis that treatments have negligible effects: "
        "minimum-effect tests in the general linear model. Journal of Applied Psychology 84: 234–248.",
    ),
    Reference(
        "neslehova2007",
        "Nešlehová 2007",
        "Nešlehová J (2007). On rank correlation measures for non-continuous random variables. Journal of "
        "Multivariate Analysis 98: 544–567.",
    ),
    Reference(
        "neumann1941",
        "von Neumann 1941",
        "von Neumann J (1941). Distribution of the ratio of the mean square successive difference to the "
        "variance. Annals of Mathematical Statistics 12: 367–395.",
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
        "plackett1954",
        "Plackett 1954",
        "Plackett RL (1954). A reduction formula for normal multivariate integrals. Biometrika 41: 351–360.",
    ),
    Reference(
        "royston1995",
        "Royston 1995",
        "Royston P (1995). Remark AS R94: a remark on algorithm AS 181: the W-test for normality. Applied "
        "Statistics 44: 547–551.",
    ),
    Reference(
        "sarkar1998",
        "Sarkar 1998",
        "Sarkar SK (1998). Some probability inequalities for ordered MTP2 random variables: a proof of the "
        "Simes conjecture. Annals of Statistics 26: 494–504.",
    ),
    Reference(
        "satterthwaite1946",
        "Satterthwaite 1946",
        "Satterthwaite FE (1946). An approximate distribution of estimates of variance components. Biometrics Bulletin "
        "2: 110–114.",
    ),
    Reference(
        "schuirmann1987",
        "Schuirmann 1987",
        "Schuirmann DJ (1987). A comparison of the two one-sided tests procedure and the power approach for "
        "assessing the equivalence of average bioavailability. Journal of Pharmacokinetics and Biopharmaceutics "
        "15: 657–680.",
    ),
    Reference(
        "shapiro1965",
        "Shapiro & Wilk 1965",
        "Shapiro SS, Wilk MB (1965). An analysis of variance test for normality (complete samples). Biometrika "
        "52: 591–611.",
    ),
    Reference(
        "simes1986",
        "Simes 1986",
        "Simes RJ (1986). An improved Bonferroni procedure for multiple tests of significance. Biometrika 73: 751–754.",
    ),
    Reference(
        "spearman1904",
        "Spearman 1904",
        "Spearman C (1904). The proof and measurement of association between two things. American Journal of "
        "Psychology 15: 72–101.",
    ),
    Reference(
        "steiger1980",
        "Steiger 1980",
        "Steiger JH (1980). Tests for comparing elements of a correlation matrix. Psychological Bulletin 87: 245–251.",
    ),
    Reference(
        "student1921",
        "Student 1921",
        "Student (1921). An experimental determination of the probable error of Dr Spearman’s correlation "
        "coefficients. Biometrika 13: 263–282.",
    ),
    Reference(
        "tukey1958",
        "Tukey 1958",
        "Tukey JW (1958). Bias and confidence in not-quite large samples (abstract). Annals of Mathematical Statistics "
        "29: 614.",
    ),
    Reference(
        "vandewiel2001",
        "van de Wiel & Di Bucchianico 2001",
        "van de Wiel MA, Di Bucchianico A (2001). Fast computation of the exact null distribution of Spearman’s "
        "rho and Page’s L statistic for samples with and without ties. Journal of Statistical Planning and "
        "Inference 92: 133–145.",
    ),
    Reference(
        "wald1940",
        "Wald & Wolfowitz 1940",
        "Wald A, Wolfowitz J (1940). On a test whether two samples are from the same population. Annals of "
        "Mathematical Statistics 11: 147–162.",
    ),
    Reference(
        "walsh2014",
        "Walsh et al. 2014",
        "Walsh M, Srinathan SK, McAuley DF, et al. (2014). The statistical significance of randomized controlled "
        "trial results is frequently fragile: a case for a fragility index. Journal of Clinical Epidemiology 67: "
        "622–628.",
    ),
    Reference(
        "westfall1993",
        "Westfall & Young 1993",
        "Westfall PH, Young SS (1993). Resampling-based multiple testing: examples and methods for p-value "
        "adjustment. Wiley, New York.",
    ),
    Reference(
        "williams1959",
        "Williams 1959",
        "Williams EJ (1959). The comparison of regression variables. Journal of the Royal Statistical Society B "
        "21: 396–399.",
    ),
    Reference(
        "yu2024",
        "Yu & Hutson 2024",
        "Yu H, Hutson AD (2024). A robust Spearman correlation coefficient permutation test. Communications in "
        "Statistics: Theory and Methods 53: 2141–2153.",
    ),
    Reference(
        "zou2007",
        "Zou 2007",
        "Zou GY (2007). Toward using confidence intervals to compare correlations. Psychological Methods 12: 399–413.",
    ),
)
"""Every work the program may cite, by key.  Titles, volumes and pages are from memory unless a comment says otherwise."""
