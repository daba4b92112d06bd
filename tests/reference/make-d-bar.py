"""Writes d-bar.json (about a minute). Run: python3 tests/reference/make-d-bar.py. The d-bar equation of a truncated scattering transform, solved on a
square grid of the k plane with the fast Fourier transform (Knudsen, Mueller, Siltanen 2004, Journal of Computational Physics 198),
another discretisation than the polar one under test.

    mu(k) = 1 + (1 / pi) integral over |k'| < R of t(k') e_{-z}(k') conj(mu(k')) / (4 pi conj(k') (k - k')) dk'

t is the first-order transform of a disc of radius rho at z0 with the change a: with w = 2 |k| rho,
t(k) = -2 |k|^2 a e^{2 i Re(k z0)} 2 pi rho^2 J_1(w) / w. Cells that the circle |k| = R cuts count by their share inside (32 x 32 samples).
The values are extrapolated from two grids (error of second order in the spacing); lastStep is what separates these.
"""
import json
import platform
from pathlib import Path

import numpy as np
import scipy
from scipy.sparse.linalg import LinearOperator, gmres
from scipy.special import j1

RHO, Z0, A = 0.3, 0.35 + 0.2j, 0.8


def share_inside(k, h, radius):
    share = (np.abs(k) < radius).astype(float)
    cut = np.abs(np.abs(k) - radius) < h
    offsets = (np.arange(32) + 0.5) / 32 - 0.5
    for i, j in zip(*np.nonzero(cut)):
        x = k[i, j].real + h * offsets[:, None]
        y = k[i, j].imag + h * offsets[None, :]
        share[i, j] = np.mean(x * x + y * y < radius * radius)
    return share


def solve(points, radius, m):
    side = 2.2 * radius
    h = 2 * side / m
    axis = -side + h * np.arange(m)
    k = axis[None, :] + 1j * axis[:, None]
    share = share_inside(k, h, radius)
    w = 2 * np.abs(k) * RHO
    ratio = np.where(w == 0, 0.5, j1(w) / np.where(w == 0, 1, w))
    # t / (4 pi conj k): |k|^2 / conj k is k.
    potential = share * -2 * k * A * np.exp(2j * (k * Z0).real) * 2 * np.pi * RHO**2 * ratio / (4 * np.pi)
    distance = np.abs(k)
    kernel = np.where(distance == 0, 0, 1 / (np.pi * np.where(distance == 0, 1, k)))
    # Differences of points of |k| < R are shorter than 2 R: beyond 2.15 R the periodic kernel is cut.
    kernel[distance > 2.15 * radius] = 0
    spectrum = np.fft.fft2(np.fft.ifftshift(kernel)) * h * h

    out = []
    for z in points:
        q = potential * np.exp(-2j * (k * z).real)

        def apply(v):
            mu = (v[: m * m] + 1j * v[m * m :]).reshape(m, m)
            r = mu - np.fft.ifft2(spectrum * np.fft.fft2(q * np.conj(mu)))
            return np.concatenate([r.real.ravel(), r.imag.ravel()])

        one = np.concatenate([np.ones(m * m), np.zeros(m * m)])
        v, info = gmres(LinearOperator((2 * m * m, 2 * m * m), matvec=apply, dtype=float), one, rtol=1e-10, atol=0, restart=40)
        assert info == 0
        centre = (m // 2) * m + m // 2
        mu = v[centre] + 1j * v[m * m + centre]
        out.append((mu * mu).real)
    return np.array(out)


points = [0j, 0.35 + 0.2j, 0.1 + 0.5j, -0.6 - 0.3j]
cases = []
for radius in (2.0, 4.0):
    coarse, fine = solve(points, radius, 256), solve(points, radius, 512)
    values = fine + (fine - coarse) / 3
    cases.append({"R": radius, "values": values.tolist(), "lastStep": float(np.max(np.abs(fine - coarse)))})

out = {
    "source": "d-bar equation of a truncated first-order scattering transform of an off-centre disc, by the FFT on a square grid",
    "computedBy": f"make-d-bar.py, Python {platform.python_version()}, numpy {np.__version__}, scipy {scipy.__version__}",
    "disc": {"rho": RHO, "x": Z0.real, "y": Z0.imag, "change": A},
    "points": [[z.real, z.imag] for z in points],
    "cases": cases,
    "tolerance": 1e-3,
    "why": "The extrapolated grid values are good to about a third of lastStep; the polar grid interpolates in z to about 1e-3 of the change at R = 4.",
}
(Path(__file__).parent / "d-bar.json").write_text(json.dumps(out, indent=1) + "\n")
