import { solveAugmented } from '../../../linear-algebra/dense-lu';
import { matmul } from '../../../linear-algebra/matrix-product';
import type { ElectrodePlace } from './electrode-places';
import { addOwnPotential, curvedPotential, flux, potential, type PanelledCurve } from './kernels';
import type { Nodes } from './nodes';

/** A closed curve across which the conductivity jumps; contrast = (inside - outside) / (inside + outside). */
export interface Jump extends PanelledCurve {
  readonly contrast: number;
}

export interface BoundarySystem {
  /** Electrode admittances with and without the jumps, in units of the background's conductivity per unit height, L x L. */
  readonly admittance: Float64Array;
  readonly reference: Float64Array;
  readonly unknowns: number;
}

/**
 * Complete electrode model (Somersalo, Cheney, Isaacson 1992) by boundary integrals. In a body of unit conductivity with jumps the
 * potential is that of charges: u = c + S(2 j + psi) + sum_i S phi_i, S the single layer with kernel -(1/(2 pi)) ln r, j the current
 * density on the electrodes (zero elsewhere), psi a density on the whole boundary, phi_i densities on the jumps. With
 * K' f = normal derivative of S f on the curve itself:
 *   electrodes   zeta j + u = U_l
 *   boundary     psi/2 + K'(2 j + psi + sum phi_i) = 0          (du/dn = j)
 *   jump i       phi_i/2 + contrast K'(2 j + psi + sum phi_k) = 0   (sigma du/dn continuous)
 * (Kress 2014, Linear Integral Equations, chapter 6, for the layers and their jumps; from memory.) Taking 2 j out of the
 * density leaves psi smooth across electrode ends, because K' has a smooth kernel on a smooth curve. The unknowns on an electrode
 * are the moments m of j with the polynomials of its pieces, m + response (field from elsewhere) = response (U_l - c). Totals of the
 * densities are added to the last two equations: they are zero in the solution and make it unique, c follows from zero total current.
 */
export function boundarySystem(electrodes: readonly ElectrodePlace[], outer: PanelledCurve, jumps: readonly Jump[]): BoundarySystem {
  const L = electrodes.length;
  const starts: number[] = [];
  let count = 0;
  for (const { local } of electrodes) {
    starts.push(count);
    count += local.length;
  }
  const onElectrodes = count;
  const first = onElectrodes + outer.nodes.x.length;
  const jumpStarts: number[] = [];
  count = first;
  for (const { nodes } of jumps) {
    jumpStarts.push(count);
    count += nodes.x.length;
  }
  const rest = count - first;

  // [A11 | A12 B]: the electrodes and the boundary alone are the body without jumps.
  const cols = first + rest + L;
  const head = new Float64Array(first * cols);
  fillElectrodeRows(head, cols, electrodes, starts, outer, onElectrodes, jumps, jumpStarts);
  electrodes.forEach(({ response, local }, l) => {
    const n = local.length;
    for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let k = 0; k < n; k++) sum += response[i * n + k];
      head[(starts[l] + i) * cols + first + rest + l] = sum;
    }
  });
  const sources = { electrodes, starts, outer, outerStart: onElectrodes, jumps, jumpStarts };
  fillFluxRows(head, cols, onElectrodes, outer, -1, 1, sources);

  // [A21 A22]
  const tail = new Float64Array(rest * count);
  jumps.forEach((jump, i) => fillFluxRows(tail, count, jumpStarts[i] - first, jump, i, jump.contrast, sources));

  solveAugmented(head, first, cols);
  const width = rest + L;
  const unit = (row: number, l: number): number => head[row * cols + first + rest + l];
  const reference = admittances(electrodes, starts, L, unit);
  if (rest === 0) return { admittance: reference, reference, unknowns: count + L };

  // (A22 - A21 A11^-1 A12) y = -A21 A11^-1 B
  const schur = matmul(columns(tail, count, rest, 0, first), columns(head, cols, first, first, cols), rest, first, width);
  for (let i = 0; i < rest; i++) for (let j = 0; j < width; j++) schur[i * width + j] = (j < rest ? tail[i * count + first + j] : 0) - schur[i * width + j];
  solveAugmented(schur, rest, width);
  const total = matmul(columns(head, cols, onElectrodes, first, count), columns(schur, width, rest, rest, width), onElectrodes, rest, L);
  for (let i = 0; i < onElectrodes; i++) for (let l = 0; l < L; l++) total[i * L + l] = unit(i, l) - total[i * L + l];
  return { admittance: admittances(electrodes, starts, L, (row, l) => total[row * L + l]), reference, unknowns: count + L };
}

function columns(a: Float64Array, cols: number, rows: number, from: number, to: number): Float64Array {
  const part = new Float64Array(rows * (to - from));
  for (let i = 0; i < rows; i++) part.set(a.subarray(i * cols + from, i * cols + to), i * (to - from));
  return part;
}

/** Currents for unit voltages, with the constant c that makes the total current zero. */
function admittances(electrodes: readonly ElectrodePlace[], starts: readonly number[], L: number, unit: (row: number, l: number) => number): Float64Array {
  const raw = new Float64Array(L * L);
  electrodes.forEach(({ local }, k) => {
    for (let i = 0; i < local.length; i++) for (let l = 0; l < L; l++) raw[k * L + l] += unit(starts[k] + i, l);
  });
  const rows = new Float64Array(L);
  const columns = new Float64Array(L);
  let total = 0;
  for (let k = 0; k < L; k++) {
    for (let l = 0; l < L; l++) {
      rows[k] += raw[k * L + l];
      columns[l] += raw[k * L + l];
      total += raw[k * L + l];
    }
  }
  for (let k = 0; k < L; k++) for (let l = 0; l < L; l++) raw[k * L + l] -= (rows[k] * columns[l]) / total;
  return raw;
}

/** m_l + response_l (potential at its places of all that its straight self is not). */
function fillElectrodeRows(a: Float64Array, cols: number, electrodes: readonly ElectrodePlace[], starts: readonly number[], outer: PanelledCurve, outerStart: number, jumps: readonly Jump[], jumpStarts: readonly number[]): void {
  electrodes.forEach(({ local, nodes, half, response }, l) => {
    const n = local.length;
    const field = new Float64Array(n * cols);
    for (let i = 0; i < n; i++) {
      const row = i * cols;
      electrodes.forEach((other, o) => {
        for (let k = 0; k < other.local.length; k++)
          field[row + starts[o] + k] = 2 * (o === l ? curvedPotential(nodes, local, half, i, k) : potential(nodes.x[i], nodes.y[i], other.nodes.x[k], other.nodes.y[k]));
      });
      addOwnPotential(outer, nodes, i, field.subarray(row + outerStart, row + outerStart + outer.nodes.x.length));
      jumps.forEach((jump, j) => {
        const { x, y, weight } = jump.nodes;
        for (let k = 0; k < x.length; k++) field[row + jumpStarts[j] + k] = weight[k] * potential(nodes.x[i], nodes.y[i], x[k], y[k]);
      });
    }
    a.set(matmul(response, field, n, n, cols), starts[l] * cols);
    for (let i = 0; i < n; i++) a[(starts[l] + i) * cols + starts[l] + i] += 1;
  });
}

export interface Sources {
  readonly electrodes: readonly ElectrodePlace[];
  readonly starts: readonly number[];
  readonly outer: PanelledCurve;
  readonly outerStart: number;
  readonly jumps: readonly Jump[];
  readonly jumpStarts: readonly number[];
}

/** factor K'(all densities) + density/2 + half the curve's mean, at the nodes of a curve: the boundary (self = -1) or a jump. */
export function fillFluxRows(a: Float64Array, cols: number, start: number, curve: PanelledCurve, self: number, factor: number, sources: Sources): void {
  const { nodes } = curve;
  const ownStart = self < 0 ? sources.outerStart : sources.jumpStarts[self];
  let length = 0;
  for (let k = 0; k < nodes.x.length; k++) length += nodes.weight[k];
  const layer = (row: number, i: number, from: Nodes, at: number, own: boolean): void => {
    for (let k = 0; k < from.x.length; k++) a[row + at + k] = factor * from.weight[k] * flux(nodes, i, from, k, own);
  };
  for (let i = 0; i < nodes.x.length; i++) {
    const row = (start + i) * cols;
    sources.electrodes.forEach((electrode, l) => {
      for (let k = 0; k < electrode.local.length; k++) a[row + sources.starts[l] + k] = 2 * factor * flux(nodes, i, electrode.nodes, k, self < 0);
    });
    layer(row, i, sources.outer.nodes, sources.outerStart, self < 0);
    sources.jumps.forEach((jump, j) => layer(row, i, jump.nodes, sources.jumpStarts[j], j === self));
    for (let k = 0; k < nodes.x.length; k++) a[row + ownStart + k] += (0.5 * nodes.weight[k]) / length;
    a[row + ownStart + i] += 0.5;
  }
}
