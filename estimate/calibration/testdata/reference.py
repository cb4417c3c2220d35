"""Check values of shrink_test.go by SciPy and NumPy, independent of the Go code:
formulas from the papers that shrink.go names. Run as

    /usr/bin/python3 reference.py      (Python 3.11, SciPy 1.10.1)
"""
import numpy as np
from scipy.optimize import brentq
from scipy.special import digamma, polygamma
from scipy.stats import t

SCATTERED = {  # variances so unlike that the prior is at its least, 4
    "lattice": [0.31, 0.12, 0.22, 0.05, 0.41],
    "simple beams": [0.02, -0.03, 0.05, 0.01, 0.00, 0.04, -0.01],
    "trestles": [0.10, 0.22, -0.08, 0.15],
    "tube booms": [0.35],
}
LIKE = {  # between: the prior is solved for
    "lattice": [0.30, 0.06, 0.22, 0.01, 0.33, 0.13, 0.26],
    "simple beams": [0.06, -0.08, 0.10, 0.02, -0.05, 0.09, -0.04, 0.01],
    "trestles": [0.10, 0.19, -0.08, 0.15, 0.01, 0.07, 0.12, -0.03],
}


def fit(groups, say=print):
    n = np.array([len(g) for g in groups.values()])
    m = np.array([np.mean(g) for g in groups.values()])
    ss = np.array([np.sum((np.array(g) - np.mean(g)) ** 2) for g in groups.values()])
    pooled = ss.sum() / (n.sum() - len(n))
    d = (n - 1)[n > 1]
    e = np.log(ss[n > 1] / d) - digamma(d / 2) + np.log(d / 2)
    excess = e.var(ddof=1) - polygamma(1, d / 2).mean()
    d0 = brentq(lambda x: polygamma(1, x / 2) - excess, 0.1, 1e4, xtol=1e-13) if excess > polygamma(1, 50) else 100
    d0 = min(max(d0, 4), 100)
    var = (d0 * pooled + ss) / (d0 + n - 1)
    v = var / n

    def mean(tau2):
        w = 1 / (v + tau2)
        return (w * m).sum() / w.sum(), 1 / w.sum()

    def q(tau2):
        return ((m - mean(tau2)[0]) ** 2 / (v + tau2)).sum() - (len(n) - 1)

    tau2 = brentq(q, 0, 10, xtol=1e-15) if q(0) > 0 else 0
    mu, doubt_mu = mean(tau2)
    weight = v / (v + tau2)
    centre = weight * mu + (1 - weight) * m
    doubt = (1 - weight) * v + weight**2 * doubt_mu
    nu = np.minimum(d0 + n - 1, n.sum() - len(n))
    say("pooled", pooled, "prior", d0, "between", tau2, "mean", mu, "doubt", doubt_mu)
    rows = {}
    for k, s2, b, c, dc, f in zip(groups, var, weight, centre, doubt, nu):
        scale = (s2 + dc) ** 0.5
        row = [s2, b, c, dc, f, t.ppf(0.1, f, c, scale), t.ppf(0.9, f, c, scale), t.logpdf(0.2, f, c, scale)]
        rows[k] = (f, c, scale)
        say("  ", k, ", ".join(repr(float(x)) for x in row))
    return rows


def leave_one_out(groups):
    """Band, P80, mean log score, then what is believed before: ratio 1 with the scatter of the others about it."""
    every = [(k, i, y) for k in groups for i, y in enumerate(groups[k])]
    band = eighty = 0
    scores, gains = [], []
    for k, i, y in every:
        others = {g: [x for j, x in enumerate(groups[g]) if (g, j) != (k, i)] for g in groups}
        f, c, scale = fit(others, lambda *_: None)[k]
        band += t.ppf(0.1, f, c, scale) < y <= t.ppf(0.9, f, c, scale)
        eighty += y <= t.ppf(0.8, f, c, scale)
        rest = np.array([x for g in others.values() for x in g])
        scores.append(t.logpdf(y, f, c, scale))
        gains.append(scores[-1] - t.logpdf(y, len(rest), 0, np.sqrt(np.mean(rest**2))))
    print("leave one out", band, eighty, np.mean(scores), "gain", np.mean(gains), np.std(gains, ddof=1) / len(gains) ** 0.5)


fit(SCATTERED)
fit(LIKE)
leave_one_out(LIKE)
