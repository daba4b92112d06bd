"""Electrical impedance on the other side: quadratic elements assembled by whole arrays, SuperLU, and the adjoint derivative."""
import numpy as np
import scipy.sparse as sp
from scipy.spatial import Delaunay

A1, B1, W1 = 0.4459484909159649, 0.10810301816807023, 0.5 * 0.22338158967801147
A2, B2, W2 = 0.09157621350977074, 0.8168475729804585, 0.5 * 0.10995174365532187
R = np.array([A1, B1, A1, A2, B2, A2])
S = np.array([A1, A1, B1, A2, A2, B2])
WEIGHT = np.array([W1, W1, W1, W2, W2, W2])


def derivatives():
    """d/dr and d/ds of the six shape functions at the six points."""
    t = 1 - R - S
    zero = np.zeros(6)
    dr = np.stack([1 - 4 * t, 4 * R - 1, zero, 4 * (t - R), 4 * S, -4 * S])
    ds = np.stack([1 - 4 * t, zero, 4 * S - 1, -4 * R, 4 * R, 4 * (t - S)])
    return dr.T, ds.T


def element_matrices(nodes, elements, sigma):
    """Sum over the points of weight sigma |J| grad N_i . grad N_j; sigma is elements x 6."""
    dr, ds = derivatives()
    x, y = nodes[elements, 0], nodes[elements, 1]
    xr, xs, yr, ys = x @ dr.T, x @ ds.T, y @ dr.T, y @ ds.T
    jacobian = xr * ys - xs * yr
    scale = np.sqrt(WEIGHT * sigma / jacobian)
    gx = (ys * scale)[:, :, None] * dr - (yr * scale)[:, :, None] * ds
    gy = (xr * scale)[:, :, None] * ds - (xs * scale)[:, :, None] * dr
    return gx.transpose(0, 2, 1) @ gx + gy.transpose(0, 2, 1) @ gy


def simulation(array, timed, splu, o):
    nodes = array('simulation-nodes').reshape(-1, 2)
    elements = array('simulation-elements').reshape(-1, 6)
    sigma = array('simulation-conductivity').reshape(-1, 6)
    edges = array('simulation-edges').reshape(-1, 3)
    owner = array('simulation-edge-electrode')
    masses = array('simulation-masses').reshape(-1, 3, 3)
    zeta, n, electrodes = array('simulation-contacts'), len(nodes), 16
    currents = array('simulation-currents').reshape(-1, electrodes)

    def whole():
        Delaunay(nodes[: int(o['vertices'])])
        i, j = np.repeat(elements, 6, 1).ravel(), np.tile(elements, (1, 6)).ravel()
        scaled = masses / zeta[owner][:, None, None]
        contact = sp.csc_matrix((scaled.ravel(), (np.repeat(edges, 3, 1).ravel(), np.tile(edges, (1, 3)).ravel())), (n, n))
        moments = sp.csc_matrix((scaled.sum(2).ravel(), (edges.ravel(), np.repeat(owner, 3))), (n, electrodes)).toarray()
        lengths = moments.sum(0)
        voltages = []
        for conductivity in (sigma, np.full_like(sigma, o['background'])):
            matrix = sp.csc_matrix((element_matrices(nodes, elements, conductivity).ravel(), (i, j)), (n, n)) + contact
            w = splu(matrix).solve(moments)
            schur = np.diag(lengths) - moments.T @ w
            voltages.append(np.linalg.solve(schur + np.trace(schur) / electrodes ** 2, currents.T))
        return voltages[0]
    t, u = timed(whole, o['repetitions'])
    return dict(whole=t), dict(squares=float((u * u).sum()))


def derivative(array, timed, o):
    elements = array('derivative-elements').reshape(-1, 6)
    lower = array('derivative-stiffness').reshape(-1, 21)
    cell, conductivity = array('derivative-cells'), array('derivative-conductivity')
    positions = array('derivative-positions').astype(np.intp)
    count = len(elements)
    fields = array('derivative-fields').reshape(-1, 16)
    full = np.zeros((count, 6, 6))
    rows, columns = np.tril_indices(6)
    full[:, rows, columns] = lower
    full[:, columns, rows] = lower
    order = np.argsort(cell, kind='stable')
    start = np.searchsorted(cell[order], np.arange(int(o['cells'])))
    size = int(o['values'])

    def assemble():
        return np.bincount(positions, (lower * conductivity[cell][:, None]).ravel(), size)
    sorted_elements, sorted_matrices = elements[order], full[order]

    def pairs():
        u = fields[sorted_elements]
        return np.add.reduceat(u.transpose(0, 2, 1) @ (sorted_matrices @ u), start)
    t1, a = timed(assemble, o['repetitions'])
    t2, p = timed(pairs, o['repetitions'])
    return dict(assembly=t1, derivative=t2), dict(assembly=float((a * a).sum()), derivative=float((p * p).sum()))
