import type { EntityManager } from '@mikro-orm/sqlite';
import { z } from 'zod';
import { defaultDraws, defaultLadder } from '../../../shared/domain/ladder';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { AppError } from '../../../shared/errors.ts';
import { slugSchema } from '../../../shared/contracts/common';
import { familyNames } from '../../../shared/domain/families';
import { problemGrid } from '../../../solvers/problems/registry';
import { deriveDrawKey } from '../../../solvers/core/random';
import { gaussianNoise } from '../../../solvers/noise/gaussian';
import type { Simulation } from '../../entities/simulation.ts';
import { toCsv } from '../../http/csv.ts';
import type { FileReply } from '../../http/define-route.ts';
import type { Jobs } from '../../jobs/jobs.ts';
import { loadArrayValues } from '../arrays/find-array.ts';
import { caution } from '../benches/caution.ts';
import { withComments, writeNpy } from '../files/write-files.ts';
import { loadSimulationArrays } from '../simulations/show-simulation.ts';
import { simulate } from '../simulations/simulate.ts';
import type { PhantomAt } from './find-phantom.ts';
import { maySeeTruth } from './phantom-access.ts';
import { dataFileName, versionFileNames, type VersionFileName } from './version-file-names.ts';
import { versionReadme } from './version-readme.ts';

export const fileParamsSchema = z.strictObject({
  slug: slugSchema,
  n: z.coerce.number<string>().int().min(1).max(9999),
  name: z.enum(versionFileNames),
});

/** Seed of the noisy frames that come with a phantom; a bench has its own. */
export const downloadSeed = 0;

interface FileRequest extends PhantomAt {
  readonly name: VersionFileName;
  readonly actor: Actor | null;
  readonly now: Date;
  readonly origin: string;
}

/** A file of a version. What tells of a sealed ground truth is refused to who may not see it. */
export async function versionFile(em: EntityManager, jobs: Jobs, request: FileRequest): Promise<FileReply> {
  const { phantom, version, name, actor, now } = request;
  const seeTruth = maySeeTruth(actor, phantom, version, now);
  const fileName = `${phantom.slug}-v${version.n}-${name}`;
  const etag = `${version.contentHash}-${name}-${seeTruth ? 'open' : 'sealed'}`;
  const reply = (contentType: string, body: string | Uint8Array): FileReply => ({ kind: 'file', contentType, body, fileName, etag });
  if (name === 'definition.json') {
    const { definition, definitionHash, contentHash } = version;
    const content = { phantom: phantom.id, version: version.n, name: version.name, licence: version.licence, contentHash, definitionHash, definition: { ...definition, truth: seeTruth ? definition.truth : null }, caution };
    return reply('application/json; charset=utf-8', `${JSON.stringify(content, null, 2)}\n`);
  }
  if (name === 'frames.csv') return reply('text/csv; charset=utf-8', await framesCsv(em, request));
  const simulation = await simulate(em, jobs, { definition: version.definition, checks: false });
  switch (name) {
    case 'README.txt':
      return reply('text/plain; charset=utf-8', versionReadme({ ...request, simulation, seeTruth, seed: downloadSeed }));
    case 'voltages.csv':
    case 'data.csv':
      if (name !== dataFileName(version.definition.family)) throw new AppError('not-found', `The clean data of this version are in ${dataFileName(version.definition.family)}.`);
      return reply('text/csv; charset=utf-8', await dataCsv(request, simulation));
    case 'noisy-frames.npy':
      return reply('application/octet-stream', await noisyFrames(request, simulation));
    case 'truth.npy':
      if (!seeTruth) throw new AppError('forbidden', `The ground truth is sealed until ${version.sealedUntil}.`);
      return reply('application/octet-stream', await truthArray(request, simulation));
  }
}

const heading = ({ phantom, version }: PhantomAt): string[] => [
  `${version.name} (${phantom.id}, version ${version.n}), licence ${version.licence}, content hash ${version.contentHash}`,
  ...caution,
];

async function dataCsv(at: PhantomAt, simulation: Simulation): Promise<string> {
  const { frame, reference, clean } = await loadSimulationArrays(simulation);
  const { patternNames, channelNames, dataUnit, dataKind } = simulation.summary;
  const { family } = at.version.definition;
  const impedance = family === 'electrical-impedance';
  const behind = dataUnit ? `_${dataUnit}` : '';
  const rows: (string | number)[][] = [];
  patternNames.forEach((pattern, p) =>
    (channelNames[p] ?? []).forEach((channel) => {
      const i = rows.length;
      rows.push([p + 1, pattern, channel, reference[i]!, frame[i]!, clean[i]!]);
    }),
  );
  return withComments(
    [...heading(at), `${dataUnit ? `Values in ${dataUnit}` : `Values of the ${familyNames[family].dataName}`}, without noise. 'clean' is what a run adds noise to${impedance ? `: ${dataKind} data` : ''}.`],
    toCsv([...(impedance ? ['pattern', 'drive', 'measure'] : ['number', familyNames[family].groupNoun, 'value']), `reference${behind}`, `frame${behind}`, `clean${behind}`], rows),
  );
}

async function framesCsv(em: EntityManager, at: PhantomAt): Promise<string> {
  const { frames } = at.version;
  const unit = familyNames[at.version.definition.family].dataUnit;
  if (!frames) throw new AppError('not-found', 'This version has no measured frames.');
  const values = await loadArrayValues(em, { kind: 'frames', sha256: frames.sha256, rows: frames.frames, cols: frames.valuesPerFrame });
  const lines: string[] = [];
  for (let i = 0; i < frames.frames; i++) lines.push(values.subarray(i * frames.valuesPerFrame, (i + 1) * frames.valuesPerFrame).join(','));
  return withComments([...heading(at), `One row a frame, the reference frame first${unit ? `; ${unit}` : ''}.`], `${lines.join('\r\n')}\r\n`);
}

/** Levels x draws x values: the draws that a bench with the seed 0 and the default ladder would use. */
async function noisyFrames({ version }: PhantomAt, simulation: Simulation): Promise<Uint8Array> {
  const { clean } = await loadSimulationArrays(simulation);
  const all = new Float64Array(defaultLadder.length * defaultDraws * clean.length);
  for (const [levelIndex, level] of defaultLadder.entries()) {
    for (let draw = 0; draw < defaultDraws; draw++) {
      const { data } = gaussianNoise.draw(clean, level, simulation.noiseScale, deriveDrawKey(downloadSeed, version.contentHash, levelIndex, draw));
      all.set(data, (levelIndex * defaultDraws + draw) * clean.length);
    }
    // Other requests go on between levels.
    await new Promise((resolve) => setImmediate(resolve));
  }
  return writeNpy(all, [defaultLadder.length, defaultDraws, clean.length]);
}

/** The ground truth on the evaluation grid, NaN outside the body, row 0 at the lowest y. */
async function truthArray({ version }: PhantomAt, simulation: Simulation): Promise<Uint8Array> {
  const { truthImage } = await loadSimulationArrays(simulation);
  const grid = problemGrid(version.definition);
  if (grid.inside.length !== truthImage.length) throw new Error(`The truth of ${version.definitionHash} has ${truthImage.length} pixels, the grid ${grid.inside.length}.`);
  const values = new Float64Array(grid.nx * grid.ny).fill(NaN);
  grid.inside.forEach((pixel, i) => (values[pixel] = truthImage[i]!));
  return writeNpy(values, [grid.ny, grid.nx]);
}
