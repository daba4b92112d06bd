import type { IntegralEquationGeometry } from '../../../shared/domain/geometry/integral-equation';
import type { DefinitionOf } from '../../../shared/domain/phantom-definition';
import { norm2 } from '../../core/vector';
import { TruthError } from '../../truth/truth-error';
import { truthOnGrid } from '../../truth/truth-on-grid';
import type { InversionProblem, SimulatedData } from '../problem-family';
import { equationOf } from './equations';
import { dataPoints } from './inversion-problem';
import { lineTruth } from './line-truth';
import { fitPanels, integrate, type PanelRule } from './quadrature';

/** Panels before any is halved: eight nodes each, so at least eight times the cells of the inversion. */
export const simulationPanels = ({ cells }: Pick<IntegralEquationGeometry, 'cells'>): number => Math.max(400, cells);

/** Panels fitted to a function on the equation's interval. @throws RangeError where it varies too fast */
export function equationPanels(geometry: IntegralEquationGeometry, f: (t: number) => number, panels = simulationPanels(geometry)): PanelRule {
  const { from, to } = equationOf(geometry);
  return fitPanels(f, from, to, panels);
}

/** Right-hand side of a function by quadrature, at the data points. */
export function quadratureData(geometry: IntegralEquationGeometry, rule: PanelRule): Float64Array {
  const equation = equationOf(geometry);
  return dataPoints(equation, geometry.points).map((s) => integrate(rule, (t) => equation.kernel(s, t), equation.breaks(s)));
}

function gap(a: Float64Array, b: Float64Array): number {
  const difference = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) difference[i] = a[i] - b[i];
  return norm2(difference);
}

/**
 * Data of the published solution by its closed form, else by Gauss-Legendre quadrature on panels that are fitted to the truth and end at
 * the kernel's corners.
 * @throws TruthError where the truth has no admissible values, varies too fast or gives no signal
 */
export function simulateEquation(definition: DefinitionOf<'integral-equation'>, problem: InversionProblem): SimulatedData {
  const { geometry } = definition;
  const equation = equationOf(geometry);
  const truth = lineTruth(definition);
  const truthImage = truthOnGrid(truth, problem.grid);
  const closed = definition.truth.kind === 'standard' ? equation.data : undefined;
  const at = (t: number): number => truth.valueAt(t, 0);
  let panels: PanelRule;
  try {
    panels = equationPanels(geometry, at);
  } catch (cause) {
    if (cause instanceof TruthError) throw cause;
    throw new TruthError(cause instanceof Error ? cause.message : String(cause), ['truth'], { cause });
  }
  const clean = closed ? dataPoints(equation, geometry.points).map(closed) : quadratureData(geometry, panels);
  const noiseScale = norm2(clean);
  if (!(noiseScale > 0)) throw new TruthError('The data of this ground truth are zero, so noise relative to them is not defined.', ['truth']);
  const { background } = truth;
  const reference = background === 0 ? new Float64Array(geometry.points) : quadratureData(geometry, equationPanels(geometry, () => background));
  const rawGap = gap(problem.evaluate(problem.background()), reference);
  const modelGap = gap(problem.evaluate(problem.project(truth)), clean) / noiseScale;
  return {
    clean,
    frame: clean,
    reference,
    noiseScale,
    truthImage,
    backgroundImage: new Float64Array(truthImage.length).fill(background),
    grid: problem.grid,
    truth,
    targets: [],
    modelErrorFloor: modelGap,
    backgroundGap: background === 0 ? 0 : rawGap / norm2(reference),
    projectionGap: modelGap,
    unknowns: panels.nodes.length,
    elements: panels.edges.length - 1,
    cells: problem.unknowns,
    nodes: problem.nodes,
    kind: closed ? 'right-hand side in closed form' : 'composite Gauss-Legendre quadrature, eight nodes a panel, panels fitted to the ground truth',
  };
}
