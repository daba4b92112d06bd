import { atan2, cos, sin } from '../../core/math';
import { analyse, factorise } from '../../linear-algebra/sparse-cholesky';
import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { assembleStiffness, meshPattern } from './assembly';
import { edgeShapes, edgeSpeed, gaussPoints, gaussWeights } from './elements';

/** A trigonometric current density on the unit circle, cos(n theta) or sin(n theta), n >= 1. */
export interface Harmonic {
  readonly n: number;
  readonly kind: 'cos' | 'sin';
}

/**
 * Neumann-to-Dirichlet map on the unit disc without electrodes: entry (i, j) is (1/pi) times the integral of harmonic i times
 * the boundary potential for the current density harmonic j, with the elements that simulate.
 * @param sigma one value, or six per element at the quadrature points
 * @returns m x m, row-major
 */
export function neumannToDirichlet(mesh: QuadraticMesh, sigma: number | Float64Array, harmonics: readonly Harmonic[]): Float64Array {
  const pattern = meshPattern(mesh);
  const { n } = pattern;
  const m = harmonics.length;
  const values = new Float64Array(pattern.rows.length);
  assembleStiffness(mesh, pattern, sigma, values);
  // The densities integrate to zero, so a spring at one node only fixes the constant: the node comes out at zero.
  values[pattern.colStart[0]] *= 2;
  const loads = new Float64Array(n * m);
  const { nodes, boundaryEdges } = mesh;
  for (let e = 0; e < boundaryEdges.length; e += 3) {
    const edge = [boundaryEdges[e], boundaryEdges[e + 1], boundaryEdges[e + 2]];
    for (let g = 0; g < gaussPoints.length; g++) {
      const shape = edgeShapes(gaussPoints[g]);
      const weight = gaussWeights[g] * edgeSpeed(nodes, edge[0], edge[1], edge[2], gaussPoints[g]);
      let x = 0;
      let y = 0;
      for (let i = 0; i < 3; i++) {
        x += shape[i] * nodes[2 * edge[i]];
        y += shape[i] * nodes[2 * edge[i] + 1];
      }
      const theta = atan2(y, x);
      for (let j = 0; j < m; j++) {
        const density = harmonics[j].kind === 'cos' ? cos(harmonics[j].n * theta) : sin(harmonics[j].n * theta);
        for (let i = 0; i < 3; i++) loads[j * n + edge[i]] += weight * shape[i] * density;
      }
    }
  }
  const potentials = loads.slice();
  factorise(analyse(pattern), values).solveMany(potentials, m);
  const map = new Float64Array(m * m);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) {
      let sum = 0;
      for (let k = 0; k < n; k++) sum += loads[i * n + k] * potentials[j * n + k];
      map[i * m + j] = sum / Math.PI;
    }
  }
  return map;
}

/**
 * Eigenvalue of the Neumann-to-Dirichlet map of the unit disc for cos(n theta): conductivity `inside` within radius rho,
 * `outside` beyond it; (1 / (n outside)) (1 - mu rho^2n) / (1 + mu rho^2n), mu = (inside - outside) / (inside + outside)
 * (Isaacson 1986, IEEE Trans. Med. Imaging MI-5, 91-95).
 */
export function concentricEigenvalue(rho: number, inside: number, outside: number, n: number): number {
  const mu = (inside - outside) / (inside + outside);
  let power = 1;
  for (let k = 0; k < 2 * n; k++) power *= rho;
  return (1 - mu * power) / ((1 + mu * power) * n * outside);
}
