import type { ProblemFamily } from '../problem-family';
import { equationOf } from './equations';
import { createEquationInversion, dataPoints, lineGrid } from './inversion-problem';
import { simulateEquation } from './simulated-phantom';

export const integralEquationFamily: ProblemFamily<'integral-equation'> = {
  create: ({ geometry, background }) => createEquationInversion(geometry, background),
  simulate: (definition, _arrayValues, problem) => simulateEquation(definition, problem),
  grid: lineGrid,
  unknowns: ({ cells }) => cells,
  line: ({ geometry }) => `${equationOf(geometry).name}, ${geometry.points} points, ${geometry.cells} cells`,
  layout(geometry) {
    const points = dataPoints(equationOf(geometry), geometry.points);
    return { unit: '', groupNames: ['right-hand side'], valueNames: [Array.from(points, (s) => `s = ${Number(s.toPrecision(4))}`)] };
  },
};
