import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { ProblemDescriptor } from '../../../shared/domain/phantom-definition';
import { bodyCurve } from '../../../solvers/problems/electrical-impedance/body-curve';

/** Electrodes for drawing, in the order of their numbers: ends and centre, polar angles about the middle of the body, radians counter-clockwise from x. */
export interface ElectrodeLayout {
  readonly arcs: readonly { readonly from: number; readonly centre: number; readonly to: number }[];
}

type Placed = Pick<EitGeometry, 'body' | 'electrodes' | 'electrodeCoverage' | 'firstElectrodeDeg' | 'numbering' | 'electrodeAnglesDeg'>;

/** Equal widths along the boundary, at equal spacing along it or at listed angles. */
export function electrodeLayout({ body, electrodes, electrodeCoverage, firstElectrodeDeg, numbering, electrodeAnglesDeg }: Placed): ElectrodeLayout {
  const curve = bodyCurve({ body });
  const half = (0.5 * electrodeCoverage * curve.length) / electrodes;
  const start = curve.arcLength((firstElectrodeDeg * Math.PI) / 180);
  const step = ((numbering === 'clockwise' ? -1 : 1) * curve.length) / electrodes;
  const arcs = Array.from({ length: electrodes }, (_, l) => {
    const listed = electrodeAnglesDeg?.[l];
    const at = listed === undefined ? start + l * step : curve.arcLength((listed * Math.PI) / 180);
    return { from: curve.parameterAt(at - half), centre: curve.parameterAt(at), to: curve.parameterAt(at + half) };
  });
  return { arcs };
}

/** The electrodes of a problem; null for families that have none. */
export function problemElectrodes(problem: Pick<ProblemDescriptor, 'family' | 'geometry'>): ElectrodeLayout | null {
  return problem.family === 'electrical-impedance' ? electrodeLayout((problem as { geometry: EitGeometry }).geometry) : null;
}
