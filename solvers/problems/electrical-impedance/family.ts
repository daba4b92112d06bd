import type { ProblemFamily } from '../problem-family';
import { bodyGrid } from './body-grid';
import { createEitInversion, type EitInversion } from './inversion-problem';
import { channelNames, channels, patternCount, patternWords } from './patterns';
import { simulateImpedancePhantom } from './simulated-phantom';

export const electricalImpedanceFamily: ProblemFamily<'electrical-impedance'> = {
  create: ({ geometry, background, dataKind }) => createEitInversion(geometry, background, dataKind),
  // The registry hands back the problem that `create` made.
  simulate: (definition, arrayValues, problem) => simulateImpedancePhantom(definition, arrayValues, problem as EitInversion),
  grid: (geometry) => bodyGrid(geometry),
  unknowns: () => 1606,
  line: ({ geometry, dataKind }) => `${geometry.electrodes} electrodes, ${patternWords(geometry)}, ${dataKind} data`,
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
