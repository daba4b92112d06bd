import { analyse, factorise, type CholeskyAnalysis } from '../../linear-algebra/sparse-cholesky';
import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { solveDense } from './dense-solve';
import { assembleScaled, assembleStiffness, entryPosition, meshPattern, type MeshPattern } from './assembly';
import type { ElectrodeIntegrals } from './electrode-integrals';

/**
 * Complete electrode model (Somersalo, Cheney, Isaacson 1992, SIAM J. Appl. Math. 52, 1023-1040) on quadratic elements of a
 * body of radius 1. With zeta_l = z_l / R the potential solves
 *   (K + sum_l M_l / zeta_l) u = sum_l m_l U_l / zeta_l,   |e_l| U_l / zeta_l - m_l . u / zeta_l = I_l,   sum_l U_l = 0,
 * K the stiffness, M_l and m_l the mass matrix and moments of electrode l. The potential is eliminated: T U = I with the
 * L x L Schur complement T = D - B^T S^-1 B, whose null space are the constants.
 */
export interface ElectrodeModel {
  readonly mesh: QuadraticMesh;
  readonly pattern: MeshPattern;
  readonly analysis: CholeskyAnalysis;
  readonly electrodes: readonly ElectrodeIntegrals[];
}

export function electrodeModel(mesh: QuadraticMesh, electrodes: readonly ElectrodeIntegrals[]): ElectrodeModel {
  const pattern = meshPattern(mesh);
  return { mesh, pattern, analysis: analyse(pattern), electrodes };
}

/** One conductivity an element, with the element matrices for unit conductivity (`unitStiffness`). */
export interface ElementConductivity {
  readonly stiffness: Float64Array;
  readonly perElement: Float64Array;
}

/** Values of S = K + sum_l M_l / zeta_l in the order of the pattern. */
export function systemValues(model: ElectrodeModel, sigma: number | Float64Array | ElementConductivity, zeta: Float64Array): Float64Array {
  const { pattern, electrodes, mesh } = model;
  const values = new Float64Array(pattern.rows.length);
  if (typeof sigma === 'object' && 'perElement' in sigma) assembleScaled(pattern, sigma.stiffness, sigma.perElement, values);
  else assembleStiffness(mesh, pattern, sigma, values);
  for (let l = 0; l < electrodes.length; l++) {
    const electrode = electrodes[l];
    for (let e = 0; e < electrode.edges.length / 3; e++) {
      for (let i = 0; i < 3; i++) {
        for (let j = 0; j <= i; j++) {
          const position = entryPosition(pattern, electrode.edges[3 * e + i], electrode.edges[3 * e + j]);
          values[position] += electrode.masses[9 * e + 3 * i + j] / zeta[l];
        }
      }
    }
  }
  return values;
}

export interface ElectrodeSolution {
  /** Electrode voltages, patterns x L, row-major; every row sums to zero. */
  readonly voltages: Float64Array;
  /** S^-1 m_l / zeta_l, node potentials for unit voltage on electrode l, L columns of n. */
  readonly unitPotentials: Float64Array;
}

/**
 * Electrode voltages for the current patterns `currents` (rows of length L, each summing to zero).
 * Cost: one sparse factorisation and L solves, whatever the number of patterns.
 * @param zeta z_l / R, one an electrode
 */
export function solveElectrodes(model: ElectrodeModel, sigma: number | Float64Array | ElementConductivity, zeta: Float64Array, currents: Float64Array): ElectrodeSolution {
  const { electrodes, analysis, pattern } = model;
  const n = pattern.n;
  const L = electrodes.length;
  const factor = factorise(analysis, systemValues(model, sigma, zeta));
  const columns = new Float64Array(n * L);
  for (let l = 0; l < L; l++) {
    const { nodes, moments } = electrodes[l];
    for (let i = 0; i < nodes.length; i++) columns[l * n + nodes[i]] = moments[i] / zeta[l];
  }
  factor.solveMany(columns, L);
  factor.release();
  const schur = new Float64Array(L * L);
  let trace = 0;
  for (let k = 0; k < L; k++) {
    const { nodes, moments, length } = electrodes[k];
    for (let l = 0; l < L; l++) {
      let sum = 0;
      // Summed as moments times (1 - u) on the diagonal: the differences stay accurate where zeta is small and u near 1.
      if (k === l) for (let i = 0; i < nodes.length; i++) sum += moments[i] * (1 - columns[l * n + nodes[i]]);
      else for (let i = 0; i < nodes.length; i++) sum -= moments[i] * columns[l * n + nodes[i]];
      schur[k * L + l] = sum / zeta[k];
    }
    trace += length > 0 ? schur[k * L + k] : 0;
  }
  // Adding a multiple of 1 1^T grounds the mean: the solution for currents of zero sum has zero mean.
  const ground = trace / (L * L);
  for (let i = 0; i < L * L; i++) schur[i] += ground;
  const voltages = solveDense(schur, L, currents);
  return { voltages, unitPotentials: columns };
}
