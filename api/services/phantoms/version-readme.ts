import { defaultDraws, defaultLadder } from '../../../shared/domain/ladder';
import type { Simulation } from '../../entities/simulation.ts';
import { caution } from '../benches/caution.ts';
import { familyNames } from '../../../shared/domain/families';
import { phantomLine } from '../benches/phantom-facts.ts';
import type { PhantomAt } from './find-phantom.ts';
import { geometryWords } from './geometry-words.ts';
import { dataFileName } from './version-file-names.ts';

const references = { voltages: 'raw voltages', difference: 'difference signal', data: 'data' } as const;
/** In a column of names. */
const named = (name: string): string => name.padEnd(18);

/** The text that goes with the files of a version, with an example of reading them. */
export function versionReadme(input: PhantomAt & { readonly simulation: Simulation; readonly seeTruth: boolean; readonly seed: number; readonly origin: string }): string {
  const { phantom, version, simulation, seeTruth, seed, origin } = input;
  const { definition } = version;
  const { dataName, dataUnit, valueName, valueUnit } = familyNames[definition.family];
  const dataFile = dataFileName(definition.family);
  const unit = dataUnit ? `; ${dataUnit}` : '';
  const { summary } = simulation;
  const values = summary.channelNames.reduce((sum, names) => sum + names.length, 0);
  const lines = [
    `${version.name}`,
    `${phantom.id}, version ${version.n}, ${phantom.group.$.name}. Licence ${version.licence}.`,
    `Content hash ${version.contentHash}.`,
    `${origin}/phantoms/${phantom.slug}/v/${version.n}`,
    '',
    ...caution,
    '',
    'What it is',
    `${familyNames[definition.family].name}: ${phantomLine(version)}.`,
    ...geometryWords(definition),
    `Background ${[summary.background, summary.unit].join(' ').trim()}.`,
    `Simulated by ${summary.simulation.kind}${summary.simulation.unknowns > 0 ? ` with ${summary.simulation.unknowns} unknowns` : ''}; code ${simulation.codeVersion}.`,
    `Model-error floor ${Number((100 * simulation.modelErrorFloor).toPrecision(3))} %: the gap between the simulating and the inverting model. Noise below it is not what limits a result.`,
    '',
    'Files',
    `${named('definition.json')}ground truth and geometry; lengths in m, angles in degrees${valueUnit ? `, ${valueName} in ${valueUnit}` : ''}`,
    seeTruth
      ? `${named('truth.npy')}${summary.grid.ny} x ${summary.grid.nx} doubles${summary.unit ? `, ${summary.unit}` : ''}, cell averages${summary.grid.ny > 1 ? ', row 0 at the lowest y, NaN outside the body' : ''}`
      : `${named('truth.npy')}sealed until ${version.sealedUntil ?? ''}`,
    `${named(dataFile)}${values} rows of ${dataName} without noise: reference (background alone), frame (with the target), clean data${unit}`,
    `${named('noisy-frames.npy')}${defaultLadder.length} x ${defaultDraws} x ${values} doubles${dataUnit ? `, ${dataUnit}` : ''}: noise levels ${defaultLadder.join(', ')};`,
    `                  ${defaultDraws} draws a level, Gaussian, seed ${seed}. A level is the norm of the noise over the norm of the`,
    `                  ${references[definition.noiseReference]}, ${[summary.noiseScale, dataUnit].join(' ').trim()}.`,
    ...(version.frames ? [`${named('frames.csv')}${version.frames.frames} measured frames, the reference first${unit}`] : []),
    '',
    'Reading them in Python',
    '  import numpy as np',
    `  noisy = np.load("${phantom.slug}-v${version.n}-noisy-frames.npy")   # level, draw, value`,
    `  table = np.loadtxt("${phantom.slug}-v${version.n}-${dataFile}", delimiter=",", comments="#", skiprows=5, usecols=(3, 4, 5))   # reference, frame, clean`,
    'Reading them in MATLAB',
    `  table = readtable("${phantom.slug}-v${version.n}-${dataFile}", "CommentStyle", "#");`,
    '',
  ];
  return `${lines.join('\n')}`;
}
