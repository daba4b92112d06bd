import { defaultDraws, defaultLadder } from '../../../shared/domain/ladder';
import type { Simulation } from '../../entities/simulation.ts';
import { caution } from '../benches/caution.ts';
import { phantomLine } from '../benches/phantom-facts.ts';
import type { PhantomAt } from './find-phantom.ts';

/** The text that goes with the files of a version, with an example of reading them. */
export function versionReadme(input: PhantomAt & { readonly simulation: Simulation; readonly seeTruth: boolean; readonly seed: number; readonly origin: string }): string {
  const { phantom, version, simulation, seeTruth, seed, origin } = input;
  const { geometry, noiseReference } = version.definition;
  const { summary } = simulation;
  const values = summary.patterns * summary.valuesPerPattern;
  const lines = [
    `${version.name}`,
    `${phantom.id}, version ${version.n}, ${phantom.group.$.name}. Licence ${version.licence}.`,
    `Content hash ${version.contentHash}.`,
    `${origin}/phantoms/${phantom.slug}/v/${version.n}`,
    '',
    ...caution,
    '',
    'What it is',
    `${phantomLine(version)}. Disc of radius ${geometry.body.radius} m; electrodes cover ${Number((100 * geometry.electrodeCoverage).toPrecision(4))} % of the boundary,`,
    `electrode 1 at ${geometry.firstElectrodeDeg} degrees, ${geometry.numbering}; contact impedance ${geometry.contactImpedance} ohm m^2;`,
    `currents of ${geometry.current} A per metre of height. Background ${summary.background} ${summary.unit}.`,
    `Simulated by ${summary.simulation.kind} with ${summary.simulation.unknowns} unknowns; code ${simulation.codeVersion}.`,
    `Model-error floor ${Number((100 * simulation.modelErrorFloor).toPrecision(3))} %: the gap between the simulating and the inverting model. Noise below it is not what limits a result.`,
    '',
    'Files',
    'definition.json   ground truth and geometry; lengths in m, angles in degrees, conductivity in S/m',
    seeTruth
      ? `truth.npy         ${summary.grid.ny} x ${summary.grid.nx} doubles, ${summary.unit}, cell averages, row 0 at the lowest y, NaN outside the body`
      : `truth.npy         sealed until ${version.sealedUntil ?? ''}`,
    `voltages.csv      ${values} rows without noise: reference (background alone), frame (with the target), clean data; V`,
    `noisy-frames.npy  ${defaultLadder.length} x ${defaultDraws} x ${values} doubles, V: noise levels ${defaultLadder.join(', ')};`,
    `                  ${defaultDraws} draws a level, Gaussian, seed ${seed}. A level is the norm of the noise over the norm of the`,
    `                  ${noiseReference === 'voltages' ? 'raw voltages' : 'difference signal'}, ${summary.noiseScale} V.`,
    ...(version.frames ? [`frames.csv        ${version.frames.frames} measured frames, the reference first; V`] : []),
    '',
    'Reading them in Python',
    '  import numpy as np',
    `  noisy = np.load("${phantom.slug}-v${version.n}-noisy-frames.npy")   # level, draw, value`,
    `  table = np.loadtxt("${phantom.slug}-v${version.n}-voltages.csv", delimiter=",", comments="#", skiprows=5, usecols=(3, 4, 5))   # reference, frame, clean`,
    'Reading them in MATLAB',
    `  table = readtable("${phantom.slug}-v${version.n}-voltages.csv", "CommentStyle", "#");`,
    '',
  ];
  return `${lines.join('\n')}`;
}
