import type { Simulation } from '../../../../shared/contracts/simulations';
import { defaultLadder } from '../../../../shared/domain/ladder';
import { deriveDrawKey } from '../../../../solvers/core/random';
import { gaussianNoise } from '../../../../solvers/noise/gaussian';
import { sphereQuantile } from './noise-band';

/** The seed of the draw shown where no bench gives one. */
export const previewSeed = 1;

export type DataView = 'frame' | 'residual';

export interface NoisyFrame {
  /** Without noise, in the unit of the data. */
  readonly clean: Float64Array;
  /** Draw 1 at the level. */
  readonly noisy: Float64Array;
  /** Half-width of the interval that holds 90 % of the draws of one value; exact for the Gaussian model of exact norm. */
  readonly half: number;
}

function nearestLevelIndex(level: number): number {
  let best = 0;
  defaultLadder.forEach((l, i) => {
    if (Math.abs(Math.log(l / level)) < Math.abs(Math.log(defaultLadder[best]! / level))) best = i;
  });
  return best;
}

/** The data of the frame, or their change from the reference, at a noise level with the phantom's own noise reference. */
export function noisyFrame(simulation: Simulation, view: DataView, level: number): NoisyFrame {
  const m = simulation.frame.length;
  const clean = new Float64Array(m);
  for (let i = 0; i < m; i++) clean[i] = view === 'frame' ? simulation.frame[i]! : simulation.frame[i]! - simulation.reference[i]!;
  if (!(simulation.noiseScale > 0)) return { clean, noisy: clean.slice(), half: 0 };
  const key = deriveDrawKey(previewSeed, simulation.contentHash, nearestLevelIndex(level), 0);
  return { clean, noisy: gaussianNoise.draw(clean, level, simulation.noiseScale, key).data, half: sphereQuantile(m, 0.9) * level * simulation.noiseScale };
}

const prefixes = [[1, 'V'], [1e-3, 'mV'], [1e-6, '\u00b5V'], [1e-9, 'nV'], [1e-12, 'pV']] as const;
/** The unit in which the largest voltage has one to three digits before the point; other data stay as they are. */
export function dataUnit(largest: number, base: string): { factor: number; unit: string } {
  if (base !== 'V') return { factor: 1, unit: base };
  const [factor, unit] = prefixes.find(([f]) => largest >= f) ?? prefixes[prefixes.length - 1]!;
  return { factor, unit };
}

/** The same in the unit that reads well, for charts. */
export function scaledFrame(simulation: Simulation, view: DataView, level: number): { values: number[]; draw: number[]; band: number; unit: string } {
  const { clean, noisy, half } = noisyFrame(simulation, view, level);
  let largest = 0;
  for (let i = 0; i < clean.length; i++) largest = Math.max(largest, Math.abs(clean[i]!));
  const { factor, unit } = dataUnit(largest, simulation.dataUnit);
  return { values: Array.from(clean, (v) => v / factor), draw: Array.from(noisy, (v) => v / factor), band: half / factor, unit };
}
