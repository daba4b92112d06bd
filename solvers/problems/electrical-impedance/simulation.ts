import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import type { TruthField } from '../../truth/truth-field';
import { quadraturePoints } from './assembly';
import { electrodeIntegrals } from './electrode-integrals';
import { electrodeModel, solveElectrodes } from './electrode-model';
import { electrodeFrame, type ElectrodeFrame } from './electrodes';
import { currentPatterns, measure } from './patterns';
import { simulationDetail, simulationMesh, type DetailLevel, type SimulationDetail } from './simulation-mesh';

/**
 * Below this z sigma / R the electrodes are perfect conductors to about seven digits, and the system would lose more than
 * that to rounding: smaller values are raised to it.
 */
export const smallestContact = 1e-8;

/**
 * z_l sigma / R of the background for each electrode, pure numbers: the distance in radii below which the ends of an electrode are
 * smeared out.
 */
export function contactNumbers(geometry: Pick<EitGeometry, 'body' | 'electrodes' | 'contactImpedance'>, background: number): Float64Array {
  const { contactImpedance: z, electrodes, body } = geometry;
  return Float64Array.from({ length: electrodes }, (_, l) => Math.max(smallestContact, ((typeof z === 'number' ? z : z[l]) * background) / body.radius));
}

/** The smallest of them, which the sizes of elements follow. */
export function contactNumber(geometry: Pick<EitGeometry, 'body' | 'electrodes' | 'contactImpedance'>, background: number): number {
  return contactNumbers(geometry, background).reduce((smallest, value) => Math.min(smallest, value));
}

export interface SimulationOptions {
  readonly level?: DetailLevel;
  /** Overrides single sizes of the level. */
  readonly detail?: Partial<SimulationDetail>;
}

export interface Simulation {
  /** Measured voltages of the truth, V, pattern-major (`channels`). */
  readonly data: Float64Array;
  /** The same of the constant background, from the same mesh. */
  readonly reference: Float64Array;
  /** Electrode voltages, V, patterns x L, row-major, every row with zero mean. */
  readonly electrodeVoltages: Float64Array;
  readonly referenceElectrodeVoltages: Float64Array;
  /** Unknowns of the discretisation: nodes and electrodes. */
  readonly unknowns: number;
  readonly elements: number;
  readonly vertices: number;
  /** Smallest and largest wanted edge, in radii. */
  readonly hMin: number;
  readonly hMax: number;
  /** Smallest shape figure of the mesh, 1 for equilateral triangles. */
  readonly meshQuality: number;
}

/**
 * Data of a truth under the complete electrode model: isoparametric quadratic elements on a mesh graded to every electrode end
 * and conforming to the interfaces of the truth. Lengths in m, conductivity in S/m, current per unit height in A/m, contact
 * impedance in ohm m^2, voltages in V.
 * @throws RangeError when the truth is not finite and positive somewhere, or the mesh would be too large
 */
export function simulateElectricalImpedance(truth: TruthField, geometry: EitGeometry, options: SimulationOptions = {}): Simulation {
  const frame = electrodeFrame(geometry);
  const contact = contactNumber(geometry, truth.background);
  const detail = { ...simulationDetail(contact, options.level), ...options.detail };
  const { triangles, quadratic } = simulationMesh(truth, frame, detail);
  const electrodes = electrodeIntegrals(quadratic, frame);
  const model = electrodeModel(quadratic, electrodes);
  const zeta = contactNumbers(geometry, truth.background).map((value) => value / truth.background);
  const currents = currentPatterns(geometry);
  const sigma = sampleConductivity(truth, quadratic, frame);
  const electrodeVoltages = solveElectrodes(model, sigma, zeta, currents).voltages;
  const referenceElectrodeVoltages = solveElectrodes(model, truth.background, zeta, currents).voltages;
  return {
    data: measure(geometry, electrodeVoltages),
    reference: measure(geometry, referenceElectrodeVoltages),
    electrodeVoltages,
    referenceElectrodeVoltages,
    unknowns: model.pattern.n + geometry.electrodes,
    elements: quadratic.elements.length / 6,
    vertices: quadratic.vertexCount,
    hMin: detail.hMin,
    hMax: detail.hMax,
    meshQuality: triangles.quality,
  };
}

/** Conductivity at the six quadrature points of every element. */
export function sampleConductivity(truth: TruthField, mesh: QuadraticMesh, frame: ElectrodeFrame): Float64Array {
  const places = quadraturePoints(mesh);
  const sigma = new Float64Array(places.length / 2);
  for (let i = 0; i < sigma.length; i++) {
    const [x, y] = frame.toBody(places[2 * i], places[2 * i + 1]);
    const value = truth.valueAt(x, y);
    if (!(value > 0 && value < Infinity)) throw new RangeError(`The conductivity at x = ${x.toPrecision(4)} m, y = ${y.toPrecision(4)} m is ${value}: it must be a positive number.`);
    sigma[i] = value;
  }
  return sigma;
}
