import { decodeArray } from '../../../../shared/domain/array-encoding';
import { defaultLadder } from '../../../../shared/domain/ladder';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { toPicture, valueScale, type Picture } from '../../../components/images/pixels';
import type { PhantomData, ProblemSpec } from '../../../workers/reconstruction-messages';

/** The family and its geometry come from one definition; TypeScript loses that they belong together. */
function descriptorOf({ version: { definition } }: PhantomDetail, { background, dataKind }: Simulation): ProblemSpec {
  return { family: definition.family, geometry: definition.geometry, dataKind, background } as ProblemSpec;
}

/** A phantom version as the preview needs it. */
export interface PreviewPhantom {
  readonly name: string;
  readonly problem: ProblemSpec;
  readonly data: PhantomData;
  readonly grid: Simulation['grid'];
  readonly truth: Picture | null;
  readonly range: readonly [number, number];
  readonly floor: number;
  readonly unit: string;
}

export function previewPhantom(detail: PhantomDetail, simulation: Simulation): PreviewPhantom {
  const truth = simulation.truth ? decodeArray(simulation.truth) : null;
  return {
    name: detail.name, problem: descriptorOf(detail, simulation),
    data: { contentHash: simulation.contentHash, clean: Float64Array.from(simulation.clean), noiseScale: simulation.noiseScale, truth, targets: simulation.targets ?? [] },
    grid: simulation.grid, truth: truth && toPicture(truth, simulation.grid), range: valueScale(simulation.truthRange ?? [simulation.background, simulation.background], simulation.background), floor: simulation.modelErrorFloor, unit: simulation.unit,
  };
}

/** Index of the ladder level nearest to a noise, for the key of its draw. */
export function nearestIndex(levels: readonly number[], noise: number): number {
  const ladder = levels.length ? levels : defaultLadder;
  let best = 0;
  ladder.forEach((level, i) => {
    if (Math.abs(Math.log(level / noise)) < Math.abs(Math.log(ladder[best]! / noise))) best = i;
  });
  return best;
}
