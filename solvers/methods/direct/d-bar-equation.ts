import { cos, sin } from '../../core/math';
import { angularFourier } from './angular-fourier';
import { cauchyMatrices } from './cauchy-transform';
import { radialNodes } from './polar-grid';

/** Residual of the equation, relative to its right-hand side mu = 1 in the mean square over |k| < R, at which the iteration ends: mu is then good to about that. */
const tolerance = 1e-4;
const largestIteration = 30;

/** The solution at the origin of the k plane. */
export interface DBarSolution {
  readonly re: number;
  readonly im: number;
  readonly iterations: number;
  readonly converged: boolean;
}

/** Discretised mu = 1 + C(q conj mu) on |k| < R. Grid values: entry j * radii + i is at radius i and angle 2 pi j / angles. */
export interface DBarEquation {
  readonly angles: number;
  readonly radii: number;
  /** Points k of the grid. */
  readonly kr: Float64Array;
  readonly ki: Float64Array;
  /** mu(0) for a coefficient q on the grid. */
  solve(qr: Float64Array, qi: Float64Array): DBarSolution;
}

/**
 * The d-bar equation d-bar mu = q conj mu in |k| < R, d-bar mu = 0 outside, mu -> 1, as mu = 1 + C(q conj mu) with the solid Cauchy
 * transform C. Where q is smooth in the disc so is mu there, so k runs over a polar grid, on which C is a small matrix in the radius for
 * each angular mode. The equation is linear over the reals only; GMRES (Saad and Schultz 1986) in the real inner product of the disc.
 * @param R at most 12: up to there 32 or 64 angles hold the modes of q
 */
export function dBarEquation(R: number): DBarEquation {
  if (!(R > 0 && R <= 12)) throw new RangeError(`The truncation radius must lie between 0 and 12, not ${R}.`);
  // q turns by phases up to 4 R across the disc: modes up to about 2 R + 5, radial polynomials of as high a degree.
  const angles = R <= 4.5 ? 32 : 64;
  const n = 5 + Math.ceil(R);
  const nodes = radialNodes(n);
  const size = n * angles;
  const fourier = angularFourier(angles, n);
  const { place } = fourier;
  const root = rootWeights(nodes);
  const { matrices, centre } = scaledMatrices(nodes, root, angles, R);
  const kr = new Float64Array(size);
  const ki = new Float64Array(size);
  for (let j = 0; j < angles; j++) {
    const c = cos((2 * Math.PI * j) / angles);
    const s = sin((2 * Math.PI * j) / angles);
    for (let i = 0; i < n; i++) {
      kr[j * n + i] = R * nodes[i] * c;
      ki[j * n + i] = R * nodes[i] * s;
    }
  }
  const gr = new Float64Array(size);
  const gi = new Float64Array(size);
  const outR = new Float64Array(size);
  const outI = new Float64Array(size);
  let originR = 0;
  let originI = 0;

  /** (outR, outI) = C(q conj mu) for mu at `at` of `vector`, real parts before imaginary ones; (originR, originI) its value at k = 0. */
  const transform = (qr: Float64Array, qi: Float64Array, vector: Float64Array): void => {
    for (let a = 0; a < size; a++) {
      const x = vector[a];
      const y = vector[size + a];
      gr[a] = qr[a] * x + qi[a] * y;
      gi[a] = qi[a] * x - qr[a] * y;
    }
    fourier.forward(gr, gi);
    originR = 0;
    originI = 0;
    const one = place[1] * n;
    for (let j = 0; j < n; j++) {
      originR += centre[j] * gr[one + j];
      originI += centre[j] * gi[one + j];
    }
    for (let p = 0; p < angles; p++) {
      const from = place[p] * n;
      const to = place[p === 0 ? angles - 1 : p - 1] * n;
      let row = p * n * n;
      for (let i = 0; i < n; i++) {
        let x = 0;
        let y = 0;
        for (let j = 0; j < n; j++) {
          const m = matrices[row++];
          x += m * gr[from + j];
          y += m * gi[from + j];
        }
        outR[to + i] = x;
        outI[to + i] = y;
      }
    }
    fourier.backward(outR, outI);
  };

  // Vectors carry the root of the weight of their ring, so that the inner product is the plain one.
  const one = new Float64Array(2 * size);
  for (let a = 0; a < size; a++) one[a] = root[a % n];
  const basis = Array.from({ length: largestIteration + 1 }, () => new Float64Array(0));
  const vectorOf = (index: number): Float64Array => {
    if (basis[index].length === 0) basis[index] = new Float64Array(2 * size);
    return basis[index];
  };
  const width = largestIteration + 1;
  const hessenberg = new Float64Array(largestIteration * width);
  const cosines = new Float64Array(width);
  const sines = new Float64Array(width);
  const rhs = new Float64Array(width + 1);
  const weights = new Float64Array(width);
  const originsR = new Float64Array(width);
  const originsI = new Float64Array(width);

  return {
    angles,
    radii: n,
    kr,
    ki,
    solve(qr, qi) {
      // w = mu - 1 solves w - C(q conj w) = C(q).
      transform(qr, qi, one);
      let re = 1 + originR;
      let im = originI;
      const first = vectorOf(0);
      first.set(outR, 0);
      first.set(outI, size);
      let residual = length(first);
      if (!(residual > 0)) return { re, im, iterations: 0, converged: true };
      scale(first, 1 / residual);
      rhs[0] = residual;
      let steps = 0;
      while (steps < largestIteration && residual > tolerance) {
        const v = basis[steps];
        transform(qr, qi, v);
        originsR[steps] = originR;
        originsI[steps] = originI;
        const w = vectorOf(steps + 1);
        for (let a = 0; a < size; a++) {
          w[a] = v[a] - outR[a];
          w[size + a] = v[size + a] - outI[a];
        }
        const row = steps * width;
        for (let i = 0; i <= steps; i++) hessenberg[row + i] = removeAlong(basis[i], w);
        const rest = length(w);
        if (rest > 0) scale(w, 1 / rest);
        for (let i = 0; i < steps; i++) {
          const a = hessenberg[row + i];
          const b = hessenberg[row + i + 1];
          hessenberg[row + i] = cosines[i] * a + sines[i] * b;
          hessenberg[row + i + 1] = cosines[i] * b - sines[i] * a;
        }
        const last = hessenberg[row + steps];
        const diagonal = Math.sqrt(last * last + rest * rest);
        if (!(diagonal > 0)) break;
        cosines[steps] = last / diagonal;
        sines[steps] = rest / diagonal;
        hessenberg[row + steps] = diagonal;
        rhs[steps + 1] = -sines[steps] * rhs[steps];
        rhs[steps] *= cosines[steps];
        steps++;
        residual = Math.abs(rhs[steps]);
      }
      for (let i = steps - 1; i >= 0; i--) {
        let value = rhs[i];
        for (let j = i + 1; j < steps; j++) value -= hessenberg[j * width + i] * weights[j];
        weights[i] = value / hessenberg[i * width + i];
      }
      // mu(0) = 1 + C(q conj (1 + w))(0).
      for (let i = 0; i < steps; i++) {
        re += weights[i] * originsR[i];
        im += weights[i] * originsI[i];
      }
      return { re, im, iterations: steps, converged: residual <= tolerance };
    },
  };
}

/** Roots of the share of the disc's area that goes to each radius, over the number of angles later: only ratios matter but for the sum, 1. */
function rootWeights(nodes: Float64Array): Float64Array {
  const n = nodes.length;
  return Float64Array.from(nodes, (node, i) => {
    const inner = i === 0 ? 0 : 0.5 * (nodes[i - 1] + node);
    const outer = i === n - 1 ? 1 : 0.5 * (node + nodes[i + 1]);
    return Math.sqrt(outer * outer - inner * inner);
  });
}

/** Matrices between vectors that carry the roots of the weights, with the radius R and the 1 / angles of the transform in them. */
function scaledMatrices(nodes: Float64Array, root: Float64Array, angles: number, R: number): { matrices: Float64Array; centre: Float64Array } {
  const n = nodes.length;
  const { matrices, centre } = cauchyMatrices(nodes, angles);
  for (let j = 0; j < root.length; j++) root[j] /= Math.sqrt(angles);
  for (let p = 0; p < angles; p++)
    for (let i = 0; i < n; i++)
      // Mode -angles/2 would go to the one below it, which the grid does not hold.
      for (let j = 0; j < n; j++) matrices[(p * n + i) * n + j] *= p === angles / 2 ? 0 : (R * root[i]) / (root[j] * angles);
  for (let j = 0; j < n; j++) centre[j] *= R / (root[j] * angles);
  return { matrices, centre };
}

function length(a: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * a[i];
  return Math.sqrt(sum);
}

function scale(a: Float64Array, factor: number): void {
  for (let i = 0; i < a.length; i++) a[i] *= factor;
}

/** Takes the part along the unit vector `b` out of `w`. @returns its length */
function removeAlong(b: Float64Array, w: Float64Array): number {
  let along = 0;
  for (let a = 0; a < w.length; a++) along += b[a] * w[a];
  for (let a = 0; a < w.length; a++) w[a] -= along * b[a];
  return along;
}
