import type { DataKind } from '../../shared/domain/phantom-definition';
import type { SimulatedPhantom } from '../../solvers/campaign/trial';
import { createEitInversion, type EitInversion } from '../../solvers/problems/electrical-impedance/inversion-problem';
import { unitGeometry } from './impedance-case';

/** Eight electrodes, trigonometric currents, all voltages, on a coarse mesh: quick, for what must hold on any problem. */
export function electrodeProblem(dataKind: DataKind = 'difference'): EitInversion {
  const geometry = unitGeometry({ electrodes: 8, contactImpedance: 0.05, pattern: 'trigonometric', measurement: 'electrode-voltages' });
  return createEitInversion(geometry, 1, dataKind, { cellMin: 0.12, cellMax: 0.16, grading: 1.2, elementMin: 0.02 });
}

/** A disc of contrast `contrast` on the problem's own cells: for tests of the algebra, not of the accuracy. */
export function electrodeTruth(problem: EitInversion, contrast = 1): { x: Float64Array; simulated: SimulatedPhantom } {
  const x = problem.background();
  const { cellCentres } = problem;
  let area = 0;
  for (let j = 0; j < x.length; j++) {
    if ((cellCentres[2 * j] - 0.3) ** 2 + (cellCentres[2 * j + 1] - 0.2) ** 2 > 0.3 * 0.3) continue;
    x[j] += contrast;
    area += problem.unknownWeights[j];
  }
  const pixels = problem.grid.inside.length;
  const truthImage = new Float64Array(pixels);
  const backgroundImage = new Float64Array(pixels);
  problem.toImage(x, truthImage);
  problem.toImage(problem.background(), backgroundImage);
  const clean = problem.evaluate(x);
  const noiseScale = Math.sqrt(clean.reduce((sum, value) => sum + value * value, 0));
  return { x, simulated: { clean, noiseScale, truthImage, backgroundImage, targets: [{ label: 'disc', x: 0.3, y: 0.2, area, contrast }] } };
}
