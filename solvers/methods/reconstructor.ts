import type { ReconstructContext, Reconstruction, Reconstructor, NoiseInfo } from '../core/types';

type ReconstructOne = (data: Float64Array, noise: NoiseInfo, context?: ReconstructContext) => Reconstruction;

/**
 * Makes a reconstructor of a function for one frame. The batch runs the same function frame by frame, so its bits are those of
 * single calls; once aborted it returns the reconstructions finished so far.
 */
export function makeReconstructor(one: ReconstructOne, spectrum?: Float64Array): Reconstructor {
  const checked: ReconstructOne = (data, noise, context) => {
    requireNoise(noise);
    return one(data, noise, context);
  };
  return {
    reconstruct: checked,
    reconstructMany(data, noise, context) {
      if (data.length !== noise.length) throw new RangeError(`A batch of ${data.length} frames came with ${noise.length} noise entries.`);
      const out: Reconstruction[] = [];
      for (let i = 0; i < data.length; i++) {
        if (context?.aborted?.()) break;
        out.push(checked(data[i], noise[i], context));
      }
      return out;
    },
    ...(spectrum ? { spectrum } : {}),
  };
}

/** @throws RangeError for a norm of the noise that is negative or not finite */
export function requireNoise({ norm }: NoiseInfo): void {
  if (!(norm >= 0) || !Number.isFinite(norm)) throw new RangeError(`The norm of the noise must be a number from 0, not ${norm}.`);
}
