"""Writes integral-equations.json: right-hand sides by adaptive quadrature and singular values of midpoint and Galerkin matrices.

Run: python3 tests/reference/make-integral-equations.py

Kernels and solutions are written down here once more from the sources named beside them.
"""
import json
from pathlib import Path

import numpy as np
import scipy
from scipy.integrate import quad
from scipy.special import erfc

folder = Path(__file__).parent
pi = np.pi


def window(x):
    return np.where(np.abs(x) < 3, 1 + np.cos(pi * x / 3), 0.0)


def shaw(s, t):
    # numpy's sinc is sin(pi x) / (pi x).
    return (np.cos(s) + np.cos(t)) ** 2 * np.sinc(np.sin(s) + np.sin(t)) ** 2


def heat(kappa):
    def kernel(s, t):
        d = np.maximum(s - t, 1e-9)
        with np.errstate(under="ignore", over="ignore"):
            return np.where(s > t, np.exp(-1 / (4 * kappa**2 * d)) / (2 * kappa * np.sqrt(pi)) * d**-1.5, 0.0)

    return kernel


def heat_solution(t):
    return np.interp(t, [0.1, 0.25, 0.35, 0.6], [0, 1, 0.4, 0])


# Phillips 1962; Shaw 1972; Wing and Zahrt 1991; Delves and Mohamed 1985; Baart 1982; Fox and Goodwin 1953; Carasso 1982 (kernel).
equations = {
    "phillips": dict(t=(-6, 6), s=(-6, 6), K=lambda s, t: window(s - t), f=window, kinks=lambda s: [s - 3, s + 3, -3, 3]),
    "shaw": dict(t=(-pi / 2, pi / 2), s=(-pi / 2, pi / 2), K=shaw, f=lambda t: 2 * np.exp(-6 * (t - 0.8) ** 2) + np.exp(-2 * (t + 0.5) ** 2), kinks=lambda s: []),
    "gravity": dict(t=(0, 1), s=(0, 1), K=lambda s, t: 0.25 * (0.25**2 + (s - t) ** 2) ** -1.5, f=lambda t: np.sin(pi * t) + 0.5 * np.sin(2 * pi * t), kinks=lambda s: [s]),
    "second-derivative": dict(t=(0, 1), s=(0, 1), K=lambda s, t: np.where(s < t, s * (t - 1), t * (s - 1)), f=lambda t: t, kinks=lambda s: [s]),
    "baart": dict(t=(0, pi), s=(0, pi / 2), K=lambda s, t: np.exp(s * np.cos(t)), f=np.sin, kinks=lambda s: []),
    "fox-goodwin": dict(t=(0, 1), s=(0, 1), K=lambda s, t: np.sqrt(s**2 + t**2), f=lambda t: t, kinks=lambda s: [s]),
    "inverse-heat": dict(t=(0, 1), s=(0, 1), K=heat(1.0), f=heat_solution, kinks=lambda s: [s, 0.1, 0.25, 0.35, 0.6]),
}
n = 60
subcells = 8
cases = []
for key, e in equations.items():
    (a, b), (c, d) = e["t"], e["s"]
    places = c + (np.arange(n) + 0.5) * (d - c) / n
    probe = places[[0, 7, 23, 41, 59]]
    rhs = []
    for s in probe:
        ends = sorted({a, b, *(float(k) for k in e["kinks"](s) if a < k < b)})
        rhs.append(sum(quad(lambda t: float(e["K"](s, t) * e["f"](t)), x, y, epsabs=1e-14, epsrel=1e-13, limit=400)[0] for x, y in zip(ends, ends[1:])))
    # Galerkin with box functions: the kernel over each cell by the midpoint rule on eight parts of it.
    t = a + (np.arange(n * subcells) + 0.5) * (b - a) / (n * subcells)
    A = e["K"](places[:, None], t[None, :]).reshape(n, n, subcells).sum(axis=2) * (b - a) / (n * subcells)
    cases.append({
        "equation": key, "places": probe.tolist(), "rightHandSide": rhs,
        "singularValues": np.linalg.svd(A, compute_uv=False)[:12].tolist(), "frobenius": float(np.linalg.norm(A)),
    })

# The answer of a half-space to a rectangular pulse of the surface, with kappa = 0.7 (Carslaw and Jaeger 1959).
s = np.linspace(0.05, 0.95, 7)
pulse = lambda u: np.where(u > 0, erfc(1 / (2 * 0.7 * np.sqrt(np.maximum(u, 1e-300)))), 0.0)
out = {
    "source": "Computed by make-integral-equations.py from the kernels and solutions of the sources named in it.",
    "computedBy": f"numpy {np.__version__}, scipy {scipy.__version__} (quad, QUADPACK)",
    "cells": n,
    "tolerance": {
        "rightHandSide": 1e-11,
        "why": "relative to the largest value; quad is asked for 1e-13 and the closed forms are exact but for rounding",
        "singularValues": 1e-13,
        "whySingularValues": "of the largest one: entries differ by rounding of the elementary functions, and both decompositions are backward stable (Weyl)",
    },
    "cases": cases,
    "pulse": {"diffusivity": 0.7, "from": 0.2, "to": 0.45, "places": s.tolist(), "rightHandSide": (pulse(s - 0.2) - pulse(s - 0.45)).tolist()},
    "gaussLegendre": {"nodes": np.polynomial.legendre.leggauss(8)[0].tolist(), "weights": np.polynomial.legendre.leggauss(8)[1].tolist()},
}
(folder / "integral-equations.json").write_text(json.dumps(out, indent=1) + "\n")
