import { createEvaluationGrid } from '../../core/grid';
import type { ProblemFamily } from '../problem-family';
import { createEitInversion, type EitInversion } from './inversion-problem';
import { channelNames, channels, patternCount } from './patterns';
import { simulateImpedancePhantom } from './simulated-phantom';

const patternWords = { adjacent: 'adjacent pairs', trigonometric: 'trigonometric patterns' } as const;

export const electricalImpedanceFamily: ProblemFamily<'electrical-impedance'> = {
  create: ({ geometry, background, dataKind }) => createEitInversion(geometry, background, dataKind),
  // The registry hands back the problem that `create` made.
  simulate: (definition, arrayValues, problem) => simulateImpedancePhantom(definition, arrayValues, problem as EitInversion),
  grid: (geometry) => createEvaluationGrid(geometry.body.radius),
  unknowns: () => 1606,
  line: ({ geometry, dataKind }) => `${geometry.electrodes} electrodes, ${patternWords[geometry.pattern]}, ${dataKind} data`,
  layout(geometry) {
    const names = channelNames(geometry);
    const groupNames: string[] = Array.from({ length: patternCount(geometry) }, () => '');
    const valueNames: string[][] = groupNames.map(() => []);
    channels(geometry).forEach(({ pattern }, i) => {
      groupNames[pattern] = names[i].drive;
      valueNames[pattern].push(names[i].measure);
    });
    return { unit: 'V', groupNames, valueNames };
  },
};
