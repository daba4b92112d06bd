"""The other side of `npm run bench`: the same work on the same data as it is written well with numpy and scipy.

Reads one request a line, {"stage", "folder", "options"}, and answers with one line of seconds by name and of figures that show
that the same was computed. Arrays lie in the folder as raw little-endian files, name.f8 or name.i4.
"""
import json
import sys
import time
from pathlib import Path

import numpy as np
import scipy.linalg as sla
import scipy.sparse as sp
import scipy.sparse.linalg as spl
from scipy.sparse.csgraph import reverse_cuthill_mckee

from peer_campaign import campaign
from peer_impedance import derivative, simulation

folder = Path()


def array(name):
    real = folder / f'{name}.f8'
    return np.fromfile(real, '<f8') if real.exists() else np.fromfile(folder / f'{name}.i4', '<i4')


def timed(call, repetitions):
    """Seconds of each repetition after one that warms up, and the last result."""
    result = call()
    seconds = []
    for _ in range(repetitions):
        start = time.perf_counter()
        result = call()
        seconds.append(time.perf_counter() - start)
    return seconds, result


def splu(matrix):
    return spl.splu(matrix, permc_spec='MMD_AT_PLUS_A', diag_pivot_thresh=0., options=dict(SymmetricMode=True))


def symmetric(columns, rows, values):
    n = len(columns) - 1
    lower = sp.csc_matrix((values, rows, columns), (n, n))
    return (lower + sp.tril(lower, -1).T).tocsc()


def sparse_cholesky(o):
    a = symmetric(array('cholesky-columns'), array('cholesky-rows'), array('cholesky-values'))
    n = a.shape[0]
    b = np.asfortranarray(array('cholesky-right').reshape(16, n).T)
    t1, lu = timed(lambda: splu(a), o['repetitions'])
    t2, x = timed(lambda: lu.solve(b), o['repetitions'])
    t3, _ = timed(lambda: splu(a).solve(b), o['repetitions'])
    order = reverse_cuthill_mckee(a.tocsr(), symmetric_mode=True)
    c = sp.tril(a[order][:, order]).tocoo()
    width = int((c.row - c.col).max())
    band = np.zeros((width + 1, n), order='F')
    band[c.row - c.col, c.col] = c.data
    t4, _ = timed(lambda: sla.cholesky_banded(band, lower=True, check_finite=False), o['repetitions'])
    return dict(factorisation=t1, solutions=t2, cold=t3, banded=t4), dict(squares=float((x * x).sum()), entries=int(lu.L.nnz), band=width + 1)


def sparse_product(o):
    rows, cols = int(o['rows']), int(o['cols'])
    a = sp.csr_matrix((array('projection-values'), array('projection-columns'), array('projection-rows')), (rows, cols))
    at = a.T.tocsr()
    x, y = array('projection-image'), array('projection-data')
    t1, p = timed(lambda: a @ x, o['repetitions'])
    t2, q = timed(lambda: at @ y, o['repetitions'])
    return dict(apply=t1, adjoint=t2), dict(apply=float(p @ p), adjoint=float(q @ q))


def singular_values(o):
    a = array('svd-matrix').reshape(int(o['rows']), int(o['cols']))
    t, (_, s, _) = timed(lambda: np.linalg.svd(a, full_matrices=False), o['repetitions'])
    return dict(svd=t), dict(sum=float(s.sum()))


def batch(o):
    m, r, pixels, draws = (int(o[k]) for k in ('data', 'rank', 'pixels', 'draws'))
    left, basis, f, data = array('batch-left').reshape(m, r), array('batch-basis').reshape(r, pixels), array('batch-filter'), array('batch-data').reshape(draws, m)
    t, x = timed(lambda: ((data @ left) * f) @ basis, o['repetitions'])
    return dict(batch=t), dict(squares=float((x[:, [0, -1]] ** 2).sum()))


STAGES = {
    'sparse-cholesky': sparse_cholesky,
    'sparse-product': sparse_product,
    'singular-values': singular_values,
    'batch': batch,
    'simulation': lambda o: simulation(array, timed, splu, o),
    'derivative': lambda o: derivative(array, timed, o),
    'campaign': lambda o: campaign(array, timed, o),
}

for line in sys.stdin:
    request = json.loads(line)
    folder = Path(request['folder'])
    seconds, figures = STAGES[request['stage']](request['options'])
    print(json.dumps(dict(seconds=seconds, figures=figures)), flush=True)
