import type { NoiseInfo, ReconstructContext, Reconstruction, Reconstructor } from '../core/types';
import { matmul, matmulTransposed, withProduct } from '../linear-algebra/matrix-product';
import type { SpectralData } from '../parameter-choice/spectral-data';
import { requireNoise } from './reconstructor';
import { expandCoefficients, frameSpectrum, outsideOf, requireFrame, type SpectralSystem } from './spectral-system';

/** What a method decides for one frame: coefficients of the basis, of which the first `count` are used, and the rest of its report. */
export interface SpectralChoice {
  readonly d: Float64Array;
  readonly count: number;
  readonly report: Omit<Reconstruction, 'x' | 'samples'>;
}

type Choose = (frame: SpectralData, noise: NoiseInfo, data: Float64Array, context?: ReconstructContext) => SpectralChoice;

/** Frames taken together; a caller that wants to stop is asked between two batches. */
const batch = 256;
/** Fewer frames than this are taken one by one. */
const worthProduct = 3;

/**
 * A reconstructor that works on the coefficients u_i^T y. A batch of frames goes through one product with U and one with the
 * basis; their entries are summed in the order of single frames, so the bits are the same.
 */
export function makeSpectralReconstructor(system: SpectralSystem, choose: Choose): Reconstructor {
  const one = (data: Float64Array, noise: NoiseInfo, context?: ReconstructContext): Reconstruction => {
    requireNoise(noise);
    const { d, count, report } = choose(frameSpectrum(system, data), noise, data, context);
    return { x: expandCoefficients(system, d, count), ...report };
  };
  return {
    reconstruct: one,
    reconstructMany(data, noise, context) {
      if (data.length !== noise.length) throw new RangeError(`A batch of ${data.length} frames came with ${noise.length} noise entries.`);
      const out: Reconstruction[] = [];
      for (let from = 0; from < data.length && !context?.aborted?.(); from += batch) {
        const some = data.slice(from, from + batch);
        if (some.length < worthProduct) {
          for (let i = 0; i < some.length && !(i > 0 && context?.aborted?.()); i++) out.push(one(some[i], noise[from + i], context));
          continue;
        }
        const frames = frameSpectra(system, some);
        const choices: SpectralChoice[] = [];
        for (let i = 0; i < some.length && !(i > 0 && context?.aborted?.()); i++) {
          requireNoise(noise[from + i]);
          choices.push(choose(frames[i], noise[from + i], some[i], context));
        }
        const images = expandMany(system, choices);
        choices.forEach(({ report }, i) => out.push({ x: images[i], ...report }));
      }
      return out;
    },
    spectrum: system.singularValues,
  };
}

/** `frameSpectrum` of several frames. */
function frameSpectra(system: SpectralSystem, frames: readonly Float64Array[]): SpectralData[] {
  const { dataSize, left, leftColumns, offset, rank } = system;
  const centred = new Float64Array(frames.length * dataSize);
  frames.forEach((data, f) => {
    requireFrame(system, data);
    for (let i = 0; i < dataSize; i++) centred[f * dataSize + i] = data[i] - offset[i];
  });
  const coefficients = matmul(centred, left, frames.length, dataSize, leftColumns);
  const fitted = leftColumns < dataSize ? matmulTransposed(coefficients, left, frames.length, leftColumns, dataSize) : null;
  return frames.map((_, f) => {
    const c = coefficients.slice(f * leftColumns, (f + 1) * leftColumns);
    const outside = outsideOf(c, rank, centred.subarray(f * dataSize, (f + 1) * dataSize), fitted?.subarray(f * dataSize, (f + 1) * dataSize) ?? null);
    return { singularValues: system.singularValues, coefficients: c, outside, dataSize };
  });
}

/** `expandCoefficients` of several choices. */
function expandMany(system: SpectralSystem, choices: readonly SpectralChoice[]): Float64Array[] {
  const { unknowns, basis, background } = system;
  const used = choices.reduce((most, { count }) => Math.max(most, count), 0);
  // Zeros past the end of a shorter choice add nothing to its sums.
  const d = new Float64Array(choices.length * used);
  choices.forEach((choice, f) => d.set(choice.d.subarray(0, choice.count), f * used));
  return withProduct(d, basis.subarray(0, used * unknowns), choices.length, used, unknowns, (all) => choices.map((_, f) => {
    const x = new Float64Array(unknowns);
    for (let j = 0, from = f * unknowns; j < unknowns; j++, from++) x[j] = all[from] + background[j];
    return x;
  }));
}
