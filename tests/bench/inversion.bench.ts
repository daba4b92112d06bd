/** Times of the electrical-impedance inversion model: medians over repetitions, in ms. `npm run bench` prints them. */
import { eitGeometrySchema } from '../../shared/domain/geometry/electrical-impedance';
import { createProblem } from '../../solvers/problems/registry';
import { medianMs, type BenchRow } from './linear-algebra.bench';

/** Preparation, forward solve, derivative, and both together for one geometry. */
export function timeInversion(electrodes: 16 | 32 = 16): BenchRow[] {
  const adjacent = electrodes === 16;
  const geometry = eitGeometrySchema.parse({
    body: { kind: 'disc', radius: 0.14 }, electrodes, electrodeCoverage: 0.5, contactImpedance: 2e-4, current: 0.005,
    pattern: adjacent ? 'adjacent' : 'trigonometric', measurement: adjacent ? 'adjacent-undriven' : 'electrode-voltages',
  });
  const create = () => createProblem({ family: 'electrical-impedance', geometry, dataKind: 'absolute', background: 0.2 });
  const problem = create();
  // Two points in turn: the model keeps its latest solution, so the same point twice would measure nothing.
  const points = [0.1, 0.2].map((t) => problem.background().map((v, i) => v * (1 + t * Math.cos(i))));
  let turn = 0;
  const next = (): Float64Array => points[turn++ & 1];
  const size = `${electrodes} electrodes, ${problem.unknowns} cells, ${problem.nodes} nodes`;
  const name = (what: string): string => `inversion model: ${what}`;
  const image = new Float64Array(problem.grid.inside.length);
  return [
    { name: name('preparation'), milliseconds: medianMs(3, create), size },
    { name: name('forward solve'), milliseconds: medianMs(7, () => problem.evaluate(next())), size },
    { name: name('derivative at a solved point'), milliseconds: medianMs(7, () => problem.linearise(points[0])), size },
    {
      name: name('forward solve with derivative'),
      milliseconds: medianMs(7, () => {
        const x = next();
        problem.evaluate(x);
        problem.linearise(x);
      }),
      size,
    },
    { name: name('image of the cells'), milliseconds: medianMs(15, () => problem.toImage(points[0], image)), size },
  ];
}
