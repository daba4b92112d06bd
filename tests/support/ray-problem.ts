import { xrayGeometrySchema, type BeamKey } from '../../shared/domain/geometry/x-ray';
import type { SimulatedPhantom } from '../../solvers/campaign/trial';
import type { ForwardProblem } from '../../solvers/core/types';
import { createProblem } from '../../solvers/problems/registry';

/** A few views through a coarse disc: quick, for what must hold on any problem. */
export function rayProblem(beam: BeamKey): ForwardProblem {
  const geometry = xrayGeometrySchema.parse({
    body: { kind: 'disc', radius: 1 }, beam, views: 9, arcDeg: beam === 'fan' ? 360 : 180, detectors: 14, detectorSpacing: beam === 'fan' ? 0.25 : 0.15, cells: 10,
    ...(beam === 'fan' ? { sourceDistance: 3, detectorDistance: 2 } : {}),
  });
  return createProblem({ family: 'x-ray', geometry, dataKind: 'absolute', background: 0.5 });
}

/** A block of contrast `contrast` on the problem's own cells: for tests of the algebra, not of the accuracy. */
export function rayTruth(problem: ForwardProblem, contrast = 1): { x: Float64Array; simulated: SimulatedPhantom } {
  const x = problem.background().map((value, j) => value + (j > 30 && j < 60 && j % 10 > 3 ? contrast : 0));
  const pixels = problem.grid.inside.length;
  const truthImage = new Float64Array(pixels);
  const backgroundImage = new Float64Array(pixels);
  problem.toImage(x, truthImage);
  problem.toImage(problem.background(), backgroundImage);
  const clean = problem.evaluate(x);
  const noiseScale = Math.sqrt(clean.reduce((sum, value) => sum + value * value, 0));
  return { x, simulated: { clean, noiseScale, truthImage, backgroundImage, targets: [] } };
}
