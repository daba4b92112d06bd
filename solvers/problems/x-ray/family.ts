import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { createEvaluationGrid } from '../../core/grid';
import type { ProblemFamily } from '../problem-family';
import { createXrayInversion } from './inversion-problem';
import { viewAngles } from './rays';
import { simulateXrayPhantom } from './simulated-phantom';
import { xrayCells, xrayEvaluationSide } from './system-matrix';

/** Two decimals of a degree at most. */
const degrees = (angle: number): string => String(Number(angle.toFixed(2)));

function acquisition({ beam, views, arcDeg, detectors }: XrayGeometry): string {
  return `${views} ${beam} ${views === 1 ? 'view' : 'views'} over ${degrees(arcDeg)}°, ${detectors} detector cells`;
}

export const xrayFamily: ProblemFamily<'x-ray'> = {
  create: ({ geometry, background }) => createXrayInversion(geometry, background),
  simulate: simulateXrayPhantom,
  grid: (geometry) => createEvaluationGrid(geometry.body.radius, xrayEvaluationSide(geometry)),
  unknowns: (geometry) => xrayCells(geometry).inside.length,
  line: ({ geometry }) => acquisition(geometry),
  layout(geometry) {
    const cells = Array.from({ length: geometry.detectors }, (_, j) => `cell ${j + 1}`);
    const angles = viewAngles(geometry);
    return { unit: '', groupNames: angles.map((angle) => `view ${degrees(angle)}°`), valueNames: angles.map(() => cells) };
  },
};
