import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { TruthField } from '../../../truth/truth-field';
import { solveDense } from '../dense-solve';
import { electrodePlaces } from '../electrodes';
import { currentPatterns, measure } from '../patterns';
import { contactNumbers } from '../simulation';
import { placeElectrodes, type ElectrodeArc } from './electrode-places';
import type { ResponseDetail } from './electrode-response';
import type { PanelledCurve } from './kernels';
import { panelNodes } from './nodes';
import { smoothScene } from './outlines';
import type { SmoothCurve } from './smooth-curve';
import { boundarySystem, type Jump } from './system';

export type BoundaryLevel = 'coarse' | 'normal' | 'fine';

/** How fine a simulation is. */
interface BoundaryDetail {
  /** Gauss points of a panel. */
  readonly order: number;
  /** To which fields are polynomials on the pieces of electrodes. */
  readonly tolerance: number;
  readonly response: ResponseDetail;
  /** Panels are cut into this many. */
  readonly parts: number;
}

const details: { readonly [K in BoundaryLevel]: BoundaryDetail } = {
  coarse: { order: 8, tolerance: 1e-5, response: { order: 8, tipShare: 0.05, tipLargest: 0.02 }, parts: 1 },
  normal: { order: 12, tolerance: 1e-8, response: { order: 12, tipShare: 0.02, tipLargest: 0.01 }, parts: 1 },
  fine: { order: 12, tolerance: 1e-11, response: { order: 16, tipShare: 0.005, tipLargest: 0.0025 }, parts: 2 },
};

export interface BoundarySimulation {
  /** Measured voltages of the truth, V, pattern-major (`channels`), and the same of the constant background from the same panels. */
  readonly data: Float64Array;
  readonly reference: Float64Array;
  /** Electrode voltages, V, patterns x L, row-major, every row with zero mean. */
  readonly electrodeVoltages: Float64Array;
  readonly referenceElectrodeVoltages: Float64Array;
  /** Unknowns of the dense system: moments on electrodes, densities, electrode voltages. */
  readonly unknowns: number;
  /** Panels of the boundary and the outlines, and pieces of electrodes. */
  readonly panels: number;
}

/** Why boundary integrals do not serve a truth in a geometry; null where they do. */
export function servedByBoundaryIntegrals(truth: TruthField, geometry: EitGeometry): string | null {
  const scene = smoothScene(truth, geometry);
  return typeof scene === 'string' ? scene : null;
}

/**
 * Data of a truth with smooth outlines under the complete electrode model, by boundary integral equations (`system.ts`). Lengths
 * in m, conductivity in S/m, current per unit height in A/m, contact impedance in ohm m^2, voltages in V.
 * @throws RangeError with the reason where `servedByBoundaryIntegrals` gives one
 */
export function simulateByBoundaryIntegrals(truth: TruthField, geometry: EitGeometry, options: { readonly level?: BoundaryLevel } = {}): BoundarySimulation {
  const scene = smoothScene(truth, geometry);
  if (typeof scene === 'string') throw new RangeError(scene);
  const { order, tolerance, response, parts } = details[options.level ?? 'normal'];
  const breaks = scene.panels.map((list) => divide(list, parts));
  const panelled = (curve: SmoothCurve, k: number): PanelledCurve => ({ curve, breaks: breaks[k], order, nodes: panelNodes(curve, breaks[k], order) });
  const outer = panelled(scene.outer, 0);
  const jumps: Jump[] = scene.outlines.map(({ curve, inside, outside }, i) => ({ ...panelled(curve, i + 1), contrast: (inside - outside) / (inside + outside) }));
  const { body } = scene;
  const electrodes = placeElectrodes(
    electrodeArcs(geometry, truth.background),
    { curve: outer.curve, length: body.length / body.radius, parameterAt: (s) => body.parameterAt(s * body.radius), breaks: breaks[0].map((t) => body.arcLength(t) / body.radius) },
    jumps.map(({ nodes }) => nodes),
    tolerance,
    response,
  );
  const system = boundarySystem(electrodes, outer, jumps);
  const currents = currentPatterns(geometry);
  const electrodeVoltages = voltages(system.admittance, currents, geometry.electrodes, truth.background);
  const referenceElectrodeVoltages = voltages(system.reference, currents, geometry.electrodes, truth.background);
  return {
    data: measure(geometry, electrodeVoltages),
    reference: measure(geometry, referenceElectrodeVoltages),
    electrodeVoltages,
    referenceElectrodeVoltages,
    unknowns: system.unknowns,
    panels: breaks.reduce((sum, list) => sum + list.length - 1, 0) + electrodes.reduce((sum, { pieces }) => sum + pieces.orders.length, 0),
  };
}

function divide(breaks: readonly number[], parts: number): number[] {
  const result = [breaks[0]];
  for (let p = 0; p + 1 < breaks.length; p++) for (let k = 1; k <= parts; k++) result.push(k === parts ? breaks[p + 1] : breaks[p] + ((breaks[p + 1] - breaks[p]) * k) / parts);
  return result;
}

function electrodeArcs(geometry: EitGeometry, background: number): ElectrodeArc[] {
  const contacts = contactNumbers(geometry, background);
  return electrodePlaces(geometry).map(({ from, to }, l) => ({ from, to, zeta: contacts[l] }));
}

/** Rows of voltages with zero mean for rows of currents. @param admittance of unit conductivity, with constants as its null space */
function voltages(admittance: Float64Array, currents: Float64Array, L: number, background: number): Float64Array {
  const grounded = admittance.slice();
  let trace = 0;
  for (let l = 0; l < L; l++) trace += admittance[l * L + l];
  for (let i = 0; i < L * L; i++) grounded[i] += trace / (L * L);
  return solveDense(grounded, L, currents).map((v) => v / background);
}
