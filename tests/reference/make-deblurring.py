"""Writes deblurring.json: small pictures blurred by scipy.ndimage and scipy.signal with each point-spread function and edge.

Run: python3 tests/reference/make-deblurring.py
"""
import json
from pathlib import Path

import numpy as np
import scipy
from scipy import ndimage, signal

folder = Path(__file__).parent
rng = np.random.default_rng(7)
ny, nx = 9, 12
dx = dy = 0.1
picture = np.round(rng.uniform(0, 1, (ny, nx)), 4)
modes = {"zero": "constant", "periodic": "wrap", "reflective": "reflect"}


def gaussian(sigma):
    """Samples at pixel centres out to five deviations, of unit sum."""
    n = int(np.ceil(5 * sigma / dx))
    w = np.exp(-0.5 * (np.arange(-n, n + 1) * dx / sigma) ** 2)
    w /= w.sum()
    return np.outer(w, w)


def disc(radius):
    """Share of 8 x 8 samples of each pixel inside the disc."""
    n = int(np.ceil(radius / dx + 0.5))
    u = (np.arange(-8 * n - 4, 8 * n + 4) + 0.5) / 8 * dx
    inside = (u[:, None] ** 2 + u[None, :] ** 2 < radius**2).astype(float)
    k = inside.reshape(2 * n + 1, 8, 2 * n + 1, 8).sum(axis=(1, 3))
    return k / k.sum()


def motion(half, degrees):
    """Evenly spaced points of the path, counted by pixel."""
    c, s = np.cos(np.deg2rad(degrees)), np.sin(np.deg2rad(degrees))
    n = int(np.ceil(half / dx)) + 1
    k = np.zeros((2 * n + 1, 2 * n + 1))
    points = 64 * (int(np.ceil(abs(half * c) / dx + 0.5)) + int(np.ceil(abs(half * s) / dy + 0.5)))
    for t in half * (np.arange(points) + 0.5) / points:
        i, j = int(np.floor(t * s / dy + 0.5)), int(np.floor(t * c / dx + 0.5))
        k[n + i, n + j] += 1
        k[n - i, n - j] += 1
    return k / k.sum()


spreads = [("gaussian", 0.12, None, gaussian(0.12)), ("disc", 0.23, None, disc(0.23)), ("motion", 0.27, 35.0, motion(0.27, 35.0))]
cases = []
for name, spread, degrees, kernel in spreads:
    for edge, mode in modes.items():
        # Every kernel is the same seen from both sides, so a correlation is a convolution.
        blurred = ndimage.correlate(picture, kernel, mode=mode, cval=0.0)
        if edge == "zero":
            assert np.allclose(blurred, signal.convolve2d(picture, kernel, mode="same"), atol=1e-14)
        if edge == "periodic" and name == "gaussian":
            n = (kernel.shape[0] - 1) // 2
            padded = np.pad(picture, n, mode="wrap")
            assert np.allclose(blurred, signal.convolve2d(padded, kernel, mode="valid"), atol=1e-14)
        cases.append({"pointSpread": name, "spread": spread, "motionDeg": degrees, "edge": edge, "blurred": blurred.ravel().tolist()})
out = {
    "source": "Computed by make-deblurring.py: scipy.ndimage.correlate, checked there against scipy.signal.convolve2d.",
    "computedBy": f"numpy {np.__version__}, scipy {scipy.__version__}",
    "tolerance": {"absolute": 1e-13, "why": "sums of a hundred products of numbers below 1: rounding only; the weights are made by the same published rule"},
    "width": nx * dx, "height": ny * dy, "nx": nx, "ny": ny,
    "picture": picture.ravel().tolist(),
    "cases": cases,
}
(folder / "deblurring.json").write_text(json.dumps(out, indent=1) + "\n")
