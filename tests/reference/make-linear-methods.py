"""Writes linear-methods.json: reconstructions by numpy and scipy, each from the definition and in the original coordinates.

Run: python3 tests/reference/make-linear-methods.py
"""
import json
from pathlib import Path

import numpy as np
import scipy
from scipy.linalg import expm
from scipy.sparse.linalg import lsqr
from scipy.special import eval_jacobi

folder = Path(__file__).parent
rng = np.random.default_rng(20)
m, n = 9, 6
# A smoothing kernel with more data than unknowns and signs of both kinds, rounded so that the file holds it exactly.
A = np.round(np.array([[np.exp(-2.0 * (i / 8 - j / 5) ** 2) - 0.3 * j / 5 for j in range(n)] for i in range(m)]), 6)
b = np.round(A @ np.array([1.0, 2.0, -1.0, 0.5, 0.0, 1.0]) + 0.01 * rng.standard_normal(m), 6)
U, s, Vt = np.linalg.svd(A, full_matrices=False)
c = U.T @ b


def iterated_tikhonov(alpha, passes):
    x = np.zeros(n)
    for _ in range(passes):
        x = np.linalg.lstsq(np.vstack([A, alpha * np.eye(n)]), np.concatenate([b, alpha * x]), rcond=None)[0]
    return x


def showalter(alpha):
    """x(1 / alpha^2) of x' = A^T (b - A x), x(0) = 0, by the exponential of the augmented matrix."""
    block = np.zeros((n + 1, n + 1))
    block[:n, :n] = -A.T @ A
    block[:n, n] = A.T @ b
    return expm(block / alpha**2)[:n, n]


def landweber(steps, relaxation):
    x = np.zeros(n)
    for _ in range(steps):
        x = x + relaxation / s[0] ** 2 * A.T @ (b - A @ x)
    return x


def nu_method(steps, nu):
    """The residual polynomial is a Jacobi polynomial on [0, 1], 1 at 0 (Brakhage 1987; Hanke 1991)."""
    t = (s / s[0]) ** 2
    residual = eval_jacobi(steps, 2 * nu - 0.5, -0.5, 1 - 2 * t) / eval_jacobi(steps, 2 * nu - 0.5, -0.5, 1.0)
    return Vt.T @ ((1 - residual) / s * c)


def kaczmarz(sweeps, relaxation):
    x = np.zeros(n)
    for _ in range(sweeps):
        for row, value in zip(A, b):
            x = x + relaxation * (value - row @ x) / (row @ row) * row
    return x


def sirt(steps, relaxation):
    C = 1 / np.abs(A).sum(axis=0)
    R = 1 / np.abs(A).sum(axis=1)
    x = np.zeros(n)
    for _ in range(steps):
        x = x + relaxation * C * (A.T @ (R * (b - A @ x)))
    return x


def sensitivity(share, p):
    D = np.diag(np.sum(A**2, axis=0) ** p)
    sigma = np.linalg.svd(A @ np.linalg.inv(np.sqrt(D)), compute_uv=False)[0]
    return np.linalg.solve(A.T @ A + (share * sigma) ** 2 * D, A.T @ b)


alpha = 0.05
out = {
    "source": "Computed by make-linear-methods.py from the definitions of the sources named in each method.",
    "computedBy": f"numpy {np.__version__}, scipy {scipy.__version__}",
    "tolerance": {
        "relative": 1e-9,
        "why": "double precision times the condition of the regularised problem, at most about 1e5 here, with room",
        "krylov": 1e-8,
        "whyKrylov": "LSQR and CGLS lose orthogonality: against CGLS in extended precision scipy's fourth LSQR iterate is off by 2.8e-9, CGLS in double by 9e-10",
    },
    "A": A.tolist(), "b": b.tolist(), "singularValues": s.tolist(),
    "iteratedTikhonov": [{"share": alpha / s[0], "passes": k, "x": iterated_tikhonov(alpha, k).tolist()} for k in (1, 2, 5)],
    "exponential": [{"share": a / s[0], "x": showalter(a).tolist()} for a in (0.5, 0.1)],
    "sensitivity": [{"share": 0.02, "exponent": p, "x": sensitivity(0.02, p).tolist()} for p in (1, 0.5)],
    "landweber": [{"steps": k, "relaxation": w, "x": landweber(k, w).tolist()} for k, w in ((1, 1.0), (40, 1.0), (40, 1.7))],
    "nu": [{"steps": k, "nu": v, "x": nu_method(k, v).tolist()} for k, v in ((1, 1.0), (2, 1.0), (17, 1.0), (17, 0.5))],
    "lsqr": [{"steps": k, "x": lsqr(A, b, atol=0, btol=0, conlim=0, iter_lim=k)[0].tolist()} for k in (1, 2, 4)],
    "kaczmarz": [{"steps": k, "relaxation": w, "x": kaczmarz(k, w).tolist()} for k, w in ((1, 1.0), (12, 0.4))],
    "sirt": [{"steps": k, "relaxation": w, "x": sirt(k, w).tolist()} for k, w in ((1, 1.0), (30, 1.0), (30, 1.6))],
}
(folder / "linear-methods.json").write_text(json.dumps(out, indent=1) + "\n")
