import type { EntityManager } from '@mikro-orm/sqlite';
import type { Replay } from '../../../shared/contracts/runs';
import { describeProblem } from '../../../solvers/problems/registry';
import { encodeArray } from '../../../shared/domain/array-encoding';
import type { Actor } from '../../../shared/domain/permissions.ts';
import { fromBlob } from '../../entities/float64-blob.ts';
import { TrialEntity } from '../../entities/run.ts';
import { SimulationEntity } from '../../entities/simulation.ts';
import { loadAxisCases } from '../../jobs/axis-cases.ts';
import { axisOf } from './axis-of.ts';
import type { LoadedRun } from './find-run.ts';
import { truthFor } from './show-image.ts';

/** Everything a reader's own machine needs to compute the run again. Images need no truth, so a sealed phantom replays too. */
export async function replayRun(em: EntityManager, input: { readonly run: LoadedRun; readonly actor: Actor | null; readonly now: Date }): Promise<Replay> {
  const { run } = input;
  const { definition, definitionHash } = run.phantomVersion.$;
  const simulation = await em.findOneOrFail(SimulationEntity, { contentHash: definitionHash }, { populate: ['clean'] });
  const trials = await em.find(TrialEntity, { run: run.id }, { orderBy: { level: 'asc', draw: 'asc' }, fields: ['level', 'draw', 'imageHash'] });
  const truth = await truthFor(em, input);
  const cases = await loadAxisCases(em, run);
  return {
    run: run.id,
    phantomHash: run.phantomHash,
    problem: describeProblem(definition),
    configuration: run.configuration,
    noiseModel: run.noiseModel,
    axis: axisOf(run),
    cases: cases?.map(({ clean, noiseScale, rows }) => ({ clean: encodeArray(clean), noiseScale, rows: rows ? [...rows] : null })) ?? null,
    ladder: run.ladder,
    draws: run.draws,
    seed: run.seed,
    noiseScale: simulation.noiseScale,
    clean: encodeArray(fromBlob(simulation.clean.$)),
    truth: truth ? encodeArray(truth) : null,
    targets: truth ? simulation.summary.targets : null,
    trials: trials.map(({ level, draw, imageHash }) => ({ level, draw, imageHash })),
    resultHash: run.resultHash ?? null,
  };
}
