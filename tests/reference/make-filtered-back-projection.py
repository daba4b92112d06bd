"""Filtered back-projections of one sinogram by scikit-image, for tests/solvers/methods/filtered-back-projection.test.ts.

python3 tests/reference/make-filtered-back-projection.py > tests/reference/filtered-back-projection.json
"""
import json
import sys

import numpy as np
import skimage
from skimage.transform import iradon

cells, views = 41, 30
angles = np.arange(views) * 180.0 / views
# Closed form of two ellipses (Kak and Slaney 1988, equations 3.1 to 3.4), lengths in detector cells.
ellipses = [(1.0, 0.0, 0.0, 14.0, 10.0, 20.0), (-0.6, 4.0, -2.0, 3.0, 5.0, -35.0)]
s = np.arange(cells) - cells // 2
sinogram = np.zeros((cells, views))
for rho, x, y, a, b, turn in ellipses:
    for k, angle in enumerate(np.radians(angles)):
        square = (a * np.cos(angle - np.radians(turn))) ** 2 + (b * np.sin(angle - np.radians(turn))) ** 2
        offset = s - x * np.cos(angle) - y * np.sin(angle)
        sinogram[:, k] += 2 * rho * a * b * np.sqrt(np.maximum(0, square - offset**2)) / square

size, stride = 25, 4
out = {
    "source": "scikit-image iradon, linear interpolation, circle=False",
    "generator": "tests/reference/make-filtered-back-projection.py",
    "versions": {"scikit-image": skimage.__version__, "numpy": np.__version__, "python": sys.version.split()[0]},
    "tolerance": {
        "ram-lak": 1e-9,
        "shepp-logan": 5e-3,
        "hann": 5e-3,
        "reason": "Ram-Lak is the same convolution, by Fourier transform of a padded line there. The other windows are sampled there on the "
        "frequencies of the padded line, here integrated in closed form: the ends of the kernel differ. Relative to the largest value.",
    },
    "cells": cells, "views": views, "size": size, "stride": stride,
    "sinogram": sinogram.T.round(12).tolist(),
    "values": {
        name: iradon(sinogram.round(12), theta=angles, output_size=size, filter_name=skimage_name, interpolation="linear", circle=False)[::stride, ::stride].tolist()
        for name, skimage_name in [("ram-lak", "ramp"), ("shepp-logan", "shepp-logan"), ("hann", "hann")]
    },
}
json.dump(out, sys.stdout)
print()
