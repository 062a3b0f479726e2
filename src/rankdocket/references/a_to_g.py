"""Works with keys from a to g, in the order of their keys.

Titles, volumes and pages are from memory unless a comment says otherwise.
"""

from typing import Final

from rankdocket.references.work import Reference

WORKS: Final = (
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
        "benjamini2005",
        "Benjamini & Yekutieli 2005",
        "Benjamini Y, Yekutieli D (2005). False discovery rate–adjusted multiple confidence intervals for "
        "selected parameters. Journal of the American Statistical Association 100: 71–81.",
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
)
