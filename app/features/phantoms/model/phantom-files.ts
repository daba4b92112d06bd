import { downloadFile, npyBytes } from '../../../lib/download';
import { toPicture } from '../../../components/images/pixels';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { defaultDraws, defaultLadder } from '../../../../shared/domain/ladder';
import { deriveDrawKey } from '../../../../solvers/core/random';
import { gaussianNoise } from '../../../../solvers/noise/gaussian';
import { electrodeAngle } from './geometry-facts';
import { previewSeed } from './noisy-data';

export interface PhantomFile {
  readonly name: string;
  readonly line: string;
  readonly bytes: number;
  readonly save: () => void;
}

export const caution = 'Results are about methods, not about patients or plant: not for diagnosis, not a safety case.';

/** Voltages as a table: pattern, channel, frame, reference and clean data, V. */
export function voltagesCsv(s: Simulation): string {
  const rows = [`# ${caution}`, 'pattern,channel,frame_V,reference_V,data_V'];
  for (let i = 0; i < s.frame.length; i++) {
    const p = Math.floor(i / s.valuesPerPattern);
    rows.push(`${s.patternNames[p] ?? ''},${s.channelNames[p]?.[i % s.valuesPerPattern] ?? ''},${s.frame[i]!},${s.reference[i]!},${s.clean[i]!}`);
  }
  return `${rows.join('\n')}\n`;
}

function electrodesCsv(detail: PhantomDetail): string {
  const { geometry } = detail.version.definition;
  const rows = ['electrode,angle_rad,x_m,y_m,width_m,contact_impedance_ohm_m2'];
  const width = (2 * Math.PI * geometry.body.radius * geometry.electrodeCoverage) / geometry.electrodes;
  for (let l = 0; l < geometry.electrodes; l++) {
    const t = electrodeAngle(l, geometry.electrodes, geometry.firstElectrodeDeg, geometry.numbering);
    rows.push(`${l + 1},${t},${geometry.body.radius * Math.cos(t)},${geometry.body.radius * Math.sin(t)},${width},${geometry.contactImpedance}`);
  }
  return `${rows.join('\n')}\n`;
}

/** All draws of the default ladder with the seed shown on the page: level, draw, value. */
export function noisyFrames(s: Simulation): Float64Array {
  const clean = Float64Array.from(s.clean);
  const m = clean.length;
  const out = new Float64Array(defaultLadder.length * defaultDraws * m);
  defaultLadder.forEach((level, l) => {
    for (let d = 0; d < defaultDraws; d++) {
      const { data } = gaussianNoise.draw(clean, level, s.noiseScale, deriveDrawKey(previewSeed, s.contentHash, l, d));
      out.set(data, (l * defaultDraws + d) * m);
    }
  });
  return out;
}

/** What can be taken home of a version; the truth only where the reader may see it. */
export function phantomFiles(detail: PhantomDetail, s: Simulation): PhantomFile[] {
  const base = `${detail.slug}-v${detail.version.n}`;
  const text = (suffix: string, content: string, type: string) => ({ bytes: new Blob([content]).size, save: () => downloadFile(`${base}-${suffix}`, content, type) });
  const files: PhantomFile[] = [];
  const { truth } = s;
  if (truth) {
    const size = s.grid.nx * s.grid.ny;
    files.push({
      name: `Ground truth on a ${s.grid.nx} grid`, line: 'array file, double; NaN outside the body, row 0 at the lowest y', bytes: 128 + 8 * size,
      save: () => downloadFile(`${base}-truth.npy`, npyBytes(toPicture(decodeArray(truth), s.grid).values, [s.grid.ny, s.grid.nx]), 'application/octet-stream'),
    });
  }
  const definition = JSON.stringify({ caution, phantom: detail.id, version: detail.version.n, contentHash: detail.version.contentHash, licence: detail.version.licence, definition: detail.version.definition }, null, 2);
  files.push({ name: 'Definition', line: 'text, lengths in m, conductivity in S/m', ...text('definition.json', definition, 'application/json') });
  files.push({ name: 'Electrode list', line: 'table, one row an electrode', ...text('electrodes.csv', electrodesCsv(detail), 'text/csv') });
  files.push({ name: 'Noise-free voltages', line: `table, ${s.frame.length} rows`, ...text('voltages.csv', voltagesCsv(s), 'text/csv') });
  const count = defaultLadder.length * defaultDraws;
  files.push({
    name: `All ${count} noisy frames`, line: `array file, double; level, draw, value; seed ${previewSeed}`, bytes: 128 + 8 * count * s.clean.length,
    save: () => downloadFile(`${base}-noisy-frames.npy`, npyBytes(noisyFrames(s), [defaultLadder.length, defaultDraws, s.clean.length]), 'application/octet-stream'),
  });
  return files;
}
