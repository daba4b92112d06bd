import type { EntityManager } from '@mikro-orm/sqlite';
import type { Run } from '../entities/run.ts';
import type { PhantomVersion } from '../entities/phantom.ts';
import { findSimulation } from '../services/simulations/simulate.ts';
import { loadSimulationArrays } from '../services/simulations/show-simulation.ts';
import { axisOf } from '../services/runs/axis-of.ts';
import { loadAxisCases, type AxisRun } from './axis-cases.ts';
import type { RunInput } from './tasks.ts';

/** What a worker needs to compute any draw of the run. */
export async function loadRunInput(em: EntityManager, run: AxisRun & Pick<Run, 'id' | 'configuration' | 'noiseModel' | 'draws' | 'seed' | 'phantomHash'>, version: Pick<PhantomVersion, 'definition' | 'definitionHash'>): Promise<RunInput> {
  const simulation = await findSimulation(em, version.definitionHash);
  const { clean, truthImage } = await loadSimulationArrays(simulation);
  return {
    key: run.id,
    definition: version.definition,
    phantomHash: run.phantomHash,
    configuration: run.configuration,
    noiseModel: run.noiseModel,
    axis: axisOf(run),
    cases: await loadAxisCases(em, run),
    ladder: run.ladder,
    draws: run.draws,
    seed: run.seed,
    noiseScale: simulation.noiseScale,
    clean,
    truthImage,
    targets: simulation.summary.targets ?? [],
    modelErrorFloor: simulation.modelErrorFloor,
  };
}
