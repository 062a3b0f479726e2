"""Works with keys from h to z, in the order of their keys.

Titles, volumes and pages are from memory unless a comment says otherwise.
"""

from typing import Final

from rankdocket.references.work import Reference

WORKS: Final = (
    Reference(
        "halton1960",
        "Halton 1960",
        "Halton JH (1960). On the efficiency of certain quasi-random sequences of points in evaluating "
        "multi-dimensional integrals. Numerische Mathematik 2: 84–90.",
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
        "oldham1962",
        "Oldham 1962",
        "Oldham PD (1962). A note on the analysis of repeated measurements of the same subjects. Journal of Chronic "
        "Diseases 15: 969–977.",
    ),
    Reference(
        "pearson1897",
        "Pearson 1897",
        "Pearson K (1897). Mathematical contributions to the theory of evolution. On a form of spurious correlation "
        "which may arise when indices are used in the measurement of organs. Proceedings of the Royal Society of "
        "London 60: 489–498.",
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
