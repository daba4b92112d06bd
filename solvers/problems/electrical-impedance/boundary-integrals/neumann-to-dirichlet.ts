import { cos, sin } from '../../../core/math';
import { solveAugmented } from '../../../linear-algebra/dense-lu';
import type { TruthField } from '../../../truth/truth-field';
import type { Harmonic } from '../continuum';
import { addOwnPotential, flux, potential, type PanelledCurve } from './kernels';
import { panelNodes } from './nodes';
import { smoothScene } from './outlines';
import type { SmoothCurve } from './smooth-curve';
import { fillFluxRows, type Jump } from './system';

const order = 12;
/** Panels are cut until there are at least so many once round: they follow cos 8 theta then. */
const leastPanels = 16;

/**
 * Neumann-to-Dirichlet map of a disc without electrodes: entry (i, j) is (1/pi) times the integral of harmonic i times the boundary
 * potential for the current density harmonic j, by the boundary integrals that simulate (`system.ts` with a given j). In units of
 * radius over background conductivity.
 * @returns m x m, row-major
 * @throws RangeError where boundary integrals do not serve the truth
 */
export function neumannToDirichletByBoundaryIntegrals(truth: TruthField, radius: number, harmonics: readonly Harmonic[]): Float64Array {
  const scene = smoothScene(truth, { body: { kind: 'disc', radius } });
  if (typeof scene === 'string') throw new RangeError(scene);
  const panelled = (curve: SmoothCurve, k: number): PanelledCurve => {
    const breaks = atMost(scene.panels[k], curve.period / leastPanels);
    return { curve, breaks, order, nodes: panelNodes(curve, breaks, order) };
  };
  const outer = panelled(scene.outer, 0);
  const jumps: Jump[] = scene.outlines.map(({ curve, inside, outside }, i) => ({ ...panelled(curve, i + 1), contrast: (inside - outside) / (inside + outside) }));
  const { nodes } = outer;
  const onBoundary = nodes.x.length;
  let count = onBoundary;
  const jumpStarts = jumps.map((jump) => (count += jump.nodes.x.length) - jump.nodes.x.length);
  const m = harmonics.length;
  const cols = count + m;
  const density = Float64Array.from({ length: onBoundary * m }, (_, i) => {
    const { n, kind } = harmonics[i % m];
    const angle = n * nodes.t[Math.floor(i / m)];
    return kind === 'cos' ? cos(angle) : sin(angle);
  });
  const a = new Float64Array(count * cols);
  const sources = { electrodes: [], starts: [], outer, outerStart: 0, jumps, jumpStarts };
  const fill = (curve: PanelledCurve, self: number, factor: number, start: number): void => {
    fillFluxRows(a, cols, start, curve, self, factor, sources);
    for (let i = 0; i < curve.nodes.x.length; i++) {
      for (let k = 0; k < onBoundary; k++) {
        const f = 2 * factor * nodes.weight[k] * flux(curve.nodes, i, nodes, k, self < 0);
        for (let j = 0; j < m; j++) a[(start + i) * cols + count + j] -= f * density[k * m + j];
      }
    }
  };
  fill(outer, -1, 1, 0);
  jumps.forEach((jump, i) => fill(jump, i, jump.contrast, jumpStarts[i]));
  solveAugmented(a, count, cols);

  const map = new Float64Array(m * m);
  const weights = new Float64Array(count);
  for (let i = 0; i < onBoundary; i++) {
    weights.fill(0);
    addOwnPotential(outer, nodes, i, weights.subarray(0, onBoundary));
    jumps.forEach((jump, s) => {
      const from = jump.nodes;
      for (let k = 0; k < from.x.length; k++) weights[jumpStarts[s] + k] = from.weight[k] * potential(nodes.x[i], nodes.y[i], from.x[k], from.y[k]);
    });
    for (let j = 0; j < m; j++) {
      let u = 0;
      for (let k = 0; k < count; k++) u += weights[k] * (a[k * cols + count + j] + (k < onBoundary ? 2 * density[k * m + j] : 0));
      for (let l = 0; l < m; l++) map[l * m + j] += (nodes.weight[i] * density[i * m + l] * u) / Math.PI;
    }
  }
  return map;
}

/** Cuts panels into equal parts no longer than `longest`. */
function atMost(breaks: readonly number[], longest: number): number[] {
  const result = [breaks[0]];
  for (let p = 0; p + 1 < breaks.length; p++) {
    const parts = Math.ceil((breaks[p + 1] - breaks[p]) / longest - 1e-9);
    for (let k = 1; k <= parts; k++) result.push(k === parts ? breaks[p + 1] : breaks[p] + ((breaks[p + 1] - breaks[p]) * k) / parts);
  }
  return result;
}
