"""Writes quasi-optimality.json for the cases of regularisation.json. Run: python3 tests/reference/make-quasi-optimality.py"""
import json
from pathlib import Path

import numpy as np
import scipy
from scipy.optimize import minimize_scalar

folder = Path(__file__).parent
cases = []
for item in json.loads((folder / "regularisation.json").read_text())["cases"]:
    b = np.array(item["inputs"]["b"])
    n = len(b)
    if "A" in item["inputs"]:
        A = np.array(item["inputs"]["A"])
    else:
        t = -np.pi / 2 + (np.arange(n) + 0.5) * np.pi / n
        S, T = np.meshgrid(t, t, indexing="ij")
        A = np.pi / n * (np.cos(S) + np.cos(T)) ** 2 * np.sinc(np.sin(S) + np.sin(T)) ** 2
    U, s, _ = np.linalg.svd(A)
    c = U.T @ b

    def change(u):
        """|| alpha dx / d alpha || / 2 by its definition, at alpha = exp(u)."""
        a = np.exp(2 * u)
        return np.linalg.norm(s * c * a / (s**2 + a) ** 2)

    grid = np.linspace(np.log(max(s[-1], 1e-9 * s[0])), np.log(s[0]), 4001)
    values = np.array([change(u) for u in grid])
    inner = [k for k in range(1, len(grid) - 1) if values[k] <= values[k - 1] and values[k] <= values[k + 1]]
    k = min(inner, key=lambda k: values[k])
    found = minimize_scalar(change, bounds=(grid[k - 1], grid[k + 1]), method="bounded", options={"xatol": 1e-12})
    cases.append({"id": item["id"], "alpha": float(np.exp(found.x)), "value": float(found.fun)})
out = {
    "source": "Definition: Tikhonov and Glasko 1965 (from memory). Computed by make-quasi-optimality.py.",
    "computedBy": f"numpy {np.__version__}, scipy {scipy.__version__}",
    "tolerance": {"alpha": 1e-5, "value": 1e-9, "why": "a flat minimum: its place is known to the square root of rounding, amplified where tiny singular values differ between codes"},
    "cases": cases,
}
(folder / "quasi-optimality.json").write_text(json.dumps(out, indent=1) + "\n")
