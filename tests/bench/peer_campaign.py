"""The campaign of twenty linear configurations on the other side: all draws of a run at once, two runs at a time."""
import time
from concurrent.futures import ThreadPoolExecutor

import numpy as np
import scipy.linalg as sla
import scipy.sparse as sp
from scipy.ndimage import correlate1d, label
from scipy.optimize import linear_sum_assignment

LADDER = np.array([1e-4, 3e-4, 1e-3, 2e-3, 5e-3, .01, .02, .05, .1, .3])
PENALTIES = ('identity', 'gradient', 'laplacian')
WINDOW = np.exp(-np.arange(-5, 6) ** 2 / (2 * 1.5 ** 2))
WINDOW /= WINDOW.sum()
POINTS = 80


def configurations():
    for penalty in PENALTIES:
        for rule in ('discrepancy', 'gcv', 'l-curve', 'quasi-optimality'):
            yield 'tikhonov', penalty, rule
    for rule in ('discrepancy', 'gcv'):
        yield 'truncated-svd', 'identity', rule
        yield 'iterated-tikhonov', 'gradient', rule
        yield 'exponential-filter', 'gradient', rule
    yield 'cgls', 'identity', 'discrepancy'
    yield 'cgls', 'gradient', 'discrepancy'


class Phantom:
    def __init__(self, array, index):
        get = lambda what: array(f'campaign-{index}-{what}')
        self.clean, self.truth, self.background, self.inside, self.offset = (get(k) for k in ('clean', 'truth', 'background', 'inside', 'offset'))
        nx, ny, x0, x1, y0, y1, self.radius, self.scale, self.value, _ = get('shape')
        self.nx, self.ny = int(nx), int(ny)
        self.jacobian = get('jacobian').reshape(len(self.clean), -1)
        n = self.jacobian.shape[1]
        self.penalty = {}
        for kind in PENALTIES:
            lower = sp.csc_matrix((get(f'{kind}-values'), get(f'{kind}-rows'), get(f'{kind}-columns')), (n, n))
            self.penalty[kind] = (lower + sp.tril(lower, -1).T).toarray()
        self.pixels = sp.csr_matrix((get('pixel-values'), get('pixel-columns'), get('pixel-rows')), (len(self.truth), n))
        self.dx, self.dy = (x1 - x0) / self.nx, (y1 - y0) / self.ny
        row, column = np.divmod(self.inside, self.nx)
        self.x, self.y = x0 + (column + .5) * self.dx, y0 + (row + .5) * self.dy
        self.targets = get('targets').reshape(-1, 4)
        self.mask = np.zeros((self.ny, self.nx), bool)
        self.mask.ravel()[self.inside] = True
        whole = correlate1d(correlate1d(self.mask.astype(float), np.ones(11), 0, mode='constant'), np.ones(11), 1, mode='constant')
        self.centres = np.flatnonzero(np.abs(whole.ravel() - 121) < .5)
        number = np.full(self.nx * self.ny, -1)
        number[self.inside] = np.arange(len(self.inside))
        right = np.where(column < self.nx - 1, number[np.minimum(self.inside + 1, self.nx * self.ny - 1)], -1)
        above = np.where(row < self.ny - 1, number[np.minimum(self.inside + self.nx, self.nx * self.ny - 1)], -1)
        self.right, self.above = (np.flatnonzero(right >= 0), right[right >= 0]), (np.flatnonzero(above >= 0), above[above >= 0])

    def system(self, kind):
        """U, s and the map from coefficients to pixels."""
        factor = sla.cholesky(self.penalty[kind], lower=True, overwrite_a=False, check_finite=False)
        a = sla.solve_triangular(factor, self.jacobian.T, lower=True, check_finite=False).T
        u, s, vt = np.linalg.svd(a, full_matrices=False)
        r = int((s > max(a.shape) * 2.22e-16 * s[0]).sum())
        basis = sla.solve_triangular(factor, vt[:r].T, lower=True, trans='T', check_finite=False)
        return u[:, :r], s[:r], np.ascontiguousarray((self.pixels @ basis).T)


def complement(method, s2, a2):
    if method == 'exponential-filter':
        return np.exp(-s2 / a2)
    g = a2 / (s2 + a2)
    return g ** 3 if method == 'iterated-tikhonov' else g


def grid_of(s):
    return np.geomspace(max(s[-1], 1e-9 * s[0]), s[0], POINTS)


def golden(value, low, high):
    """Minimum of value(u) between arrays of ends, u = ln alpha."""
    ratio = (np.sqrt(5) - 1) / 2
    a, b = high - ratio * (high - low), low + ratio * (high - low)
    fa, fb = value(a), value(b)
    for _ in range(36):
        left = fa < fb
        low, high = np.where(left, low, a), np.where(left, b, high)
        new = np.where(left, high - ratio * (high - low), low + ratio * (high - low))
        fn = value(new)
        a, b, fa, fb = np.where(left, new, b), np.where(left, a, new), np.where(left, fn, fb), np.where(left, fa, fn)
    return .5 * (low + high)


def choose_alpha(method, rule, s, c, outside, noise, size):
    """c draws x r. An alpha for each draw; infinity where the zero solution is within the noise."""
    s2, c2 = s * s, c * c
    residual = lambda a: (complement(method, s2, (a * a)[:, None]) ** 2 * c2).sum(1) + outside
    draws = len(c)
    if rule == 'discrepancy':
        target = (1.05 * noise) ** 2
        low, high = np.full(draws, np.log(1e-10 * s[0])), np.full(draws, np.log(1e8 * s[0]))
        reach = residual(np.exp(low)) >= target
        for _ in range(60):
            middle = .5 * (low + high)
            above = residual(np.exp(middle)) > target
            low, high = np.where(above, low, middle), np.where(above, middle, high)
        alpha = np.where(reach, 1e-10 * s[0], np.exp(.5 * (low + high)))
        return np.where(c2.sum(1) + outside <= target, np.inf, np.maximum(alpha, 1e-7 * s[0]))
    grid = grid_of(s)
    g = complement(method, s2, (grid * grid)[:, None])
    if rule == 'gcv':
        value = lambda u: residual(np.exp(u)) / (size - len(s) + complement(method, s2, np.exp(2 * u)[:, None]).sum(1)) ** 2
        table = (c2 @ (g * g).T + outside[:, None]) / (size - len(s) + g.sum(1)) ** 2
        best = table.argmin(1)
        return np.maximum(np.exp(golden(value, np.log(grid[np.maximum(best - 1, 0)]), np.log(grid[np.minimum(best + 1, POINTS - 1)]))), 1e-7 * s[0])
    if rule == 'quasi-optimality':
        f = s * grid[:, None] ** 2 / (s2 + grid[:, None] ** 2) ** 2
        return grid[(c2 @ (f * f).T).argmin(1)]
    rho = np.log(c2 @ (g * g).T + outside[:, None]) / 2
    eta = np.log(c2 @ (s / (s2 + grid[:, None] ** 2)).T ** 2) / 2
    u = np.log(grid)
    r1, e1 = np.gradient(rho, u, axis=1), np.gradient(eta, u, axis=1)
    r2, e2 = np.gradient(r1, u, axis=1), np.gradient(e1, u, axis=1)
    return grid[((r1 * e2 - r2 * e1) / (r1 * r1 + e1 * e1) ** 1.5).argmax(1)]


def coefficients(method, rule, s, c, outside, noise, size):
    """d draws x r and the squared residuals."""
    c2 = c * c
    if method == 'truncated-svd':
        rest = np.concatenate([np.cumsum(c2[:, ::-1], 1)[:, ::-1], np.zeros((len(c), 1))], 1) + outside[:, None]
        if rule == 'discrepancy':
            index = (rest > ((1.05 * noise) ** 2)[:, None]).sum(1).clip(0, len(s))
        else:
            limit = size // 2
            k = np.arange(min(limit, len(s)) + 1)
            index = (rest[:, : len(k)] / (size - k) ** 2).argmin(1)
        d = np.where(np.arange(len(s)) < index[:, None], c / s, 0)
        return d, rest[np.arange(len(c)), index]
    if method == 'cgls':
        z, r, target = np.zeros_like(c), c.copy(), (1.05 * noise) ** 2
        p = s * r
        gamma = (p * p).sum(1)
        direction = p
        active = (r * r).sum(1) + outside > target
        for _ in range(200):
            if not active.any():
                break
            q = s * direction
            step = np.where(active, gamma / np.maximum((q * q).sum(1), 1e-300), 0)
            z += step[:, None] * direction
            r -= step[:, None] * q
            p = s * r
            new = (p * p).sum(1)
            direction = p + (new / np.maximum(gamma, 1e-300))[:, None] * direction
            gamma = new
            active &= (r * r).sum(1) + outside > target
        return z, (r * r).sum(1) + outside
    alpha = choose_alpha(method, rule, s, c, outside, noise, size)
    zero = np.isinf(alpha)
    g = complement(method, s * s, (np.where(zero, 1, alpha) ** 2)[:, None])
    d = np.where(zero[:, None], 0, (1 - g) * c / s)
    return d, np.where(zero, c2.sum(1), (g * g * c2).sum(1)) + outside


def all_metrics(p, images, residual, noise):
    """images draws x pixels; every metric as an array of draws."""
    truth, signal = p.truth, p.truth - p.background
    error, change = images - truth, images - p.background
    size = np.abs(error)
    squares = np.einsum('dp,dp->d', error, error)
    span = truth.max() - truth.min()
    out = dict(l2=np.sqrt(squares) / np.linalg.norm(signal), sup=size.max(1), place=size.argmax(1), l1=size.sum(1) / np.abs(signal).sum(),
               psnr=10 * np.log10(span ** 2 * len(truth) / squares), residual=np.sqrt(residual) / noise)
    out['relative_sup'] = out['sup'] / np.abs(signal).max()
    e, t = images - images.mean(1)[:, None], truth - truth.mean()
    out['correlation'] = e @ t / np.sqrt(np.einsum('dp,dp->d', e, e) * (t @ t))
    slope = 0
    for (k, other), weight in ((p.right, p.dy / p.dx), (p.above, p.dx / p.dy)):
        step = error[:, other] - error[:, k]
        slope = slope + weight * np.einsum('dp,dp->d', step, step)
    out['h1'] = np.sqrt(slope)
    full = np.zeros((len(images), p.ny * p.nx))
    full[:, p.inside] = images - truth[0]
    full = full.reshape(-1, p.ny, p.nx)
    whole = np.zeros((p.ny, p.nx))
    whole.ravel()[p.inside] = truth - truth[0]
    smooth = lambda v: correlate1d(correlate1d(v, WINDOW, -1, mode='constant'), WINDOW, -2, mode='constant').reshape(v.shape[:-2] + (-1,))[..., p.centres]
    m, q, cross, mt, vt = smooth(full), smooth(full * full), smooth(full * whole), smooth(whole), smooth(whole * whole)
    c1, c2, a, b = (.01 * span) ** 2, (.03 * span) ** 2, mt + truth[0], m + truth[0]
    out['ssim'] = ((2 * a * b + c1) * (2 * (cross - m * mt) + c2) / ((a * a + b * b + c1) * (vt - mt * mt + q - m * m + c2))).mean(1)
    peak = np.abs(change).max(1)
    half = np.abs(change) >= .5 * peak[:, None]
    target = np.abs(signal) >= .5 * np.abs(signal).max()
    out['dice'] = 2 * (half & target).sum(1) / np.maximum(half.sum(1) + target.sum(), 1)
    out.update(figures_of_merit(p, change))
    return out


def figures_of_merit(p, change):
    draws = len(change)
    position, radial = np.zeros(draws), np.zeros(draws)
    missed, false, count, outside, ringing = (np.zeros(draws) for _ in range(5))
    planes = np.array([[[0] * 3] * 3, [[0, 1, 0], [1, 1, 1], [0, 1, 0]], [[0] * 3] * 3])
    for sign in (1, -1):
        wanted = p.targets[np.sign(p.targets[:, 3]) == sign]
        if len(wanted) == 0:
            continue
        amplitude = sign * change
        inside = amplitude >= np.maximum(.25 * amplitude.max(1), 1e-300)[:, None]
        stack = np.zeros((draws, p.ny * p.nx), bool)
        stack[:, p.inside] = inside
        labels, spots = label(stack.reshape(draws, p.ny, p.nx), structure=planes)
        labels = labels.reshape(draws, -1)[:, p.inside]
        flat = labels.ravel()
        area = np.bincount(flat, minlength=spots + 1)
        cx = np.bincount(flat, np.tile(p.x, draws), spots + 1) / np.maximum(area, 1)
        cy = np.bincount(flat, np.tile(p.y, draws), spots + 1) / np.maximum(area, 1)
        owner = np.zeros(spots + 1, int)
        owner[flat] = np.repeat(np.arange(draws), labels.shape[1])
        bounds = np.searchsorted(owner[1:], np.arange(draws + 1)) + 1
        count += inside.sum(1)
        for d in range(draws):
            own = np.arange(bounds[d], bounds[d + 1])
            if len(own) == 0:
                missed[d] += len(wanted)
                continue
            large = own[area[own] >= .1 * area[own].max()]
            if len(wanted) == 1:
                x, y = np.average(cx[own], weights=area[own]), np.average(cy[own], weights=area[own])
                distance = np.hypot(wanted[0, 0] - x, wanted[0, 1] - y)
                position[d] += distance
                radial[d] += np.hypot(x, y) - np.hypot(wanted[0, 0], wanted[0, 1])
            else:
                cost = np.hypot(wanted[:, None, 0] - cx[large], wanted[:, None, 1] - cy[large])
                i, j = linear_sum_assignment(cost)
                position[d] += cost[i, j].sum()
                radial[d] += (np.hypot(cx[large[j]], cy[large[j]]) - np.hypot(wanted[i, 0], wanted[i, 1])).sum()
                missed[d] += len(wanted) - len(i)
            false[d] += max(0, len(large) - len(wanted))
        weight = np.maximum(inside.sum(1), 1)
        mx, my = inside @ p.x / weight, inside @ p.y / weight
        disc = (p.x - mx[:, None]) ** 2 + (p.y - my[:, None]) ** 2 <= (weight * p.dx * p.dy / np.pi)[:, None]
        outside += (inside & ~disc).sum(1) / weight
        ringing += -np.minimum(np.where(disc, 0, amplitude), 0).sum(1) / np.maximum(np.where(disc, amplitude, 0).sum(1), 1e-300)
    n = max(len(p.targets), 1)
    return dict(position=position / n / p.radius, radial=radial / n / p.radius, missed=missed, false=false, resolution=np.sqrt(count / change.shape[1]),
                deformation=outside, ringing=ringing, response=change.sum(1) * p.dx * p.dy / (p.targets[:, 2] * p.targets[:, 3]).sum())


def campaign(array, timed, o):
    phantoms = [Phantom(array, i) for i in range(int(o['phantoms']))]
    draws, levels = int(o['draws']), LADDER[: int(o['levels'])]

    def run_phantom(index):
        p, rng = phantoms[index], np.random.default_rng(index)
        size = len(p.clean)
        systems = {kind: p.system(kind) for kind in PENALTIES}
        totals = np.zeros(3)
        for method, kind, rule in configurations():
            u, s, basis = systems[kind]
            raw = rng.standard_normal((len(levels), draws, size))
            noise = raw * (levels * p.scale)[:, None, None] / np.linalg.norm(raw, axis=2)[:, :, None]
            for at in noise:
                norm = np.linalg.norm(at, axis=1)
                y = p.clean - p.offset + at
                c = y @ u
                rest = y - c @ u.T
                d, residual = coefficients(method, rule, s, c, np.einsum('dm,dm->d', rest, rest), norm, size)
                images = d @ basis + p.background
                metrics = all_metrics(p, images, residual, norm)
                totals += np.minimum(metrics['l2'], 1).sum(), metrics['ssim'].sum(), draws
        return totals
    start = time.perf_counter()
    with ThreadPoolExecutor(2) as pool:
        error, similarity, trials = sum(pool.map(run_phantom, range(len(phantoms))))
    return dict(campaign=[time.perf_counter() - start]), dict(error=error / trials, similarity=similarity / trials, trials=trials)
