"""Writes statistics-tests.json: rank tests, profiles and the like by scipy and numpy, for tests/solvers/statistics.

Run with python3 (numpy, scipy): python3 tests/reference/make-statistics.py > tests/reference/statistics-tests.json
Exact levels are counted here by brute force over all sign patterns or orders, not by any formula of the library.
"""
import itertools
import json

import numpy as np
import scipy
from scipy import stats

rng = np.random.default_rng(20061)


def ranks(row):
    return stats.rankdata(row, method="average")


def friedman_case(table):
    table = np.asarray(table, float)
    n, k = table.shape
    result = stats.friedmanchisquare(*table.T)
    rows = [ranks(row) for row in table]
    chi = result.statistic
    f = (n - 1) * chi / (n * (k - 1) - chi) if n * (k - 1) - chi > 1e-12 else None
    case = {
        "table": table.tolist(), "meanRanks": np.mean(rows, axis=0).tolist(), "chiSquare": float(chi), "pChiSquare": float(result.pvalue),
        "f": None if f is None else float(f), "pF": None if f is None else float(stats.f.sf(f, k - 1, (k - 1) * (n - 1))),
        "criticalDifference": float(stats.studentized_range.ppf(0.95, k, np.inf) / np.sqrt(2) * np.sqrt(k * (k + 1) / (6 * n))),
    }
    observed = float(np.sum(np.sum(rows, axis=0) ** 2))
    # The first block stays: only relative orders matter.
    orders = [sorted(set(itertools.permutations(row))) for row in rows[1:]]
    if np.prod([len(o) for o in orders]) <= 400_000:
        count = total = 0
        for pick in itertools.product(*orders):
            sums = rows[0] + np.sum(pick, axis=0)
            total += 1
            count += float(np.sum(sums ** 2)) >= observed - 1e-9
        case["pExact"] = count / total
    return case


def wilcoxon_case(a, b):
    a, b = np.asarray(a, float), np.asarray(b, float)
    d = a - b
    n = len(d)
    r = ranks(np.abs(d))
    zero = r[d == 0].sum()
    case = {"a": a.tolist(), "b": b.tolist(), "positive": float(r[d > 0].sum() + zero / 2), "negative": float(r[d < 0].sum() + zero / 2)}
    approx = stats.wilcoxon(a, b, zero_method="zsplit", correction=False, method="asymptotic")
    assert abs(approx.statistic - min(case["positive"], case["negative"])) < 1e-12
    case["statistic"] = float(approx.statistic)
    case["pAsymptotic"] = float(approx.pvalue)
    signed = r[d != 0]
    if len(signed) <= 16:
        low = min(r[d > 0].sum(), r[d < 0].sum())
        sums = [np.dot(signs, signed) for signs in itertools.product((0, 1), repeat=len(signed))]
        case["pExact"] = float(min(1.0, 2 * np.mean(np.asarray(sums) <= low + 1e-9)))
    return case


def rounded(shape, digits, spread=1.0):
    return np.round(1 + spread * rng.standard_normal(shape), digits)


friedman_cases = [
    friedman_case(rounded((6, 4), 1)),
    friedman_case(rounded((5, 3), 0)),
    friedman_case(rounded((8, 3), 3)),
    friedman_case(rounded((14, 4), 2) + 0.6 * np.arange(4)),
    friedman_case(np.tile(np.arange(1.0, 5.0), (3, 1))),
    friedman_case(rounded((4, 5), 2)),
]
x = rounded(12, 1)
long = np.round(rng.standard_normal(64), 1)
wilcoxon_cases = [
    wilcoxon_case([1, 2, 3, 4, 5], [1, 1, 5, 4, 2]),
    wilcoxon_case([1.1, 2.3, 3.2, 4.7, 5.9, 6.4], [1, 2, 3, 4, 5, 6]),
    wilcoxon_case(x, x + rounded(12, 1) - 1.2),
    wilcoxon_case(np.arange(16.0), np.arange(16.0) + rng.choice([-1.0, 0.0, 1.0, 2.0], 16)),
    wilcoxon_case(long, np.round(long + 0.3 * rng.standard_normal(64) + 0.05, 1)),
    wilcoxon_case(np.round(rng.standard_normal(80) + 0.4, 3), np.round(rng.standard_normal(80), 3)),
]


def profile(losses, taus):
    """Dolan and More 2002 by the definition, one column a method."""
    losses = np.asarray([[np.inf if v is None else v for v in row] for row in losses], float)
    best = losses.min(axis=1, keepdims=True)
    with np.errstate(invalid="ignore"):
        ratio = np.where(np.isinf(losses), np.inf, losses / best)
    return {str(t): [float(np.mean(ratio[:, m] <= t)) for m in range(losses.shape[1])] for t in taus}


profile_table = [[1.0, 2.0, 4.0], [3.0, 3.0, None], [10.0, 5.0, 20.0], [0.2, 0.3, 0.1], [None, 7.0, 7.0]]

images = rng.standard_normal((6, 9)) * 0.3 + np.linspace(1, 2, 9)
truth = np.where(np.arange(9) > 4, 2.0, 1.0)
background = np.ones(9)
scale = float(np.sum((truth - background) ** 2))
mean = images.mean(axis=0)

print(json.dumps({
    "source": "scipy and numpy as named; exact levels by enumeration in make-statistics.py. Demsar 2006 and Dolan and More 2002 for the definitions.",
    "computedBy": f"scipy {scipy.__version__}, numpy {np.__version__}",
    "tolerance": "1e-9: both sides in double precision; tail functions are good to about 1e-12, scipy's studentised range to 1e-9",
    "friedman": friedman_cases,
    "wilcoxon": wilcoxon_cases,
    "profile": {"losses": profile_table, "shares": profile(profile_table, [1, 1.5, 2, 4, 1000])},
    "moments": {
        "images": images.tolist(), "truth": truth.tolist(), "background": background.tolist(),
        "biasSquared": float(np.sum((mean - truth) ** 2) / scale), "variance": float(np.sum(images.var(axis=0)) / scale),
        "meanSquaredError": float(np.mean(np.sum((images - truth) ** 2, axis=1)) / scale),
    },
}, indent=1))
