import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { TruthField } from '../../truth/truth-field';
import { servedByBoundaryIntegrals, simulateByBoundaryIntegrals } from './boundary-integrals/simulate';
import { simulateElectricalImpedance, type SimulationOptions } from './simulation';

export type Simulator = 'boundary-integrals' | 'finite-elements';

/** Data of a truth and of the background, with what a reader is told of their making. */
export interface ImpedanceData {
  readonly simulator: Simulator;
  /** Voltages, V, pattern-major. */
  readonly data: Float64Array;
  readonly reference: Float64Array;
  readonly unknowns: number;
  /** Elements, or panels. */
  readonly elements: number;
  readonly kind: string;
}

/** Smooth outlines go to boundary integrals, everything else to finite elements. */
export function simulatorFor(truth: TruthField, geometry: EitGeometry): Simulator {
  return servedByBoundaryIntegrals(truth, geometry) === null ? 'boundary-integrals' : 'finite-elements';
}

/**
 * Data by the simulator that fits, or by the one asked for.
 * @param options of finite elements; of boundary integrals only the level is read
 * @throws RangeError for what cannot be simulated
 */
export function simulateImpedanceData(truth: TruthField, geometry: EitGeometry, options: SimulationOptions = {}, simulator = simulatorFor(truth, geometry)): ImpedanceData {
  if (simulator === 'boundary-integrals') {
    const { data, reference, unknowns, panels } = simulateByBoundaryIntegrals(truth, geometry, { level: options.level });
    return { simulator, data, reference, unknowns, elements: panels, kind: 'complete electrode model, boundary integral equations on panels graded to the electrode ends' };
  }
  const { data, reference, unknowns, elements } = simulateElectricalImpedance(truth, geometry, options);
  return { simulator, data, reference, unknowns, elements, kind: 'complete electrode model, graded isoparametric quadratic elements' };
}
