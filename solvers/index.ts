/** The library's entry points: the registries, and what a worker or a browser calls. */
export * from './core/types';
export { canonicalJson, contentHash, sha256Hex } from './core/hash';
export { deriveDrawKey, deriveKey, RandomStream, type DrawKey } from './core/random';

export { methods, getMethod } from './methods/registry';
export { readParameters, readRule } from './methods/parameters';
export { parameterRules, getParameterRule } from './parameter-choice/registry';
export { noiseModels, getNoiseModel } from './noise/registry';
export { metrics, getMetric, evaluateMetrics } from './metrics/registry';

export { prepareRun, runLevel, recomputeDraw, scoreImage, trivialMetrics, type PreparedRun, type RunConfiguration, type RunLevelOptions } from './campaign/run';
export { runHash, type SimulatedPhantom, type LevelSeed, type Trial } from './campaign/trial';
export { secondsPerReconstruction, timeBaseline } from './campaign/timing';
export { errorAgainstParameter, picardData, type Sensitivity, type PicardData, type DrawOfLevel } from './campaign/sensitivity';

export { errorTable, levelStatistics, type LevelStatistics } from './statistics/error-table';
export { stabilitySheet, type StabilitySheet, type StabilityInput } from './statistics/stability-sheet';
export { rankAtNoise, type Ranking, type RankingRow, type RankingInput } from './statistics/ranking';
export { placeOnLadder, interpolateLevels } from './statistics/ladder-place';
export { type RankedEntry } from './statistics/blocks';
export { separate, separationWords, type Separation } from './statistics/separation';
export { comparePairs, type PairComparison } from './statistics/pairs';
export { pairedBootstrap, type PairedRatio } from './statistics/paired-bootstrap';
export { compareMethods, profileMethods, type Comparison } from './statistics/comparison';
export { performanceProfiles, profileAt, type PerformanceProfiles } from './statistics/performance-profile';
export { paretoFront, type CostPoint, type ParetoPlace } from './statistics/pareto-front';
export { levelMoments, type LevelMoments } from './campaign/level-moments';
export { lossOf, type Better } from './statistics/loss';
export { quantileOfSorted, median } from './statistics/quantiles';

export { createProblem, describeProblem, simulate, dataLayout, problemGrid, problemFacts } from './problems/registry';
export { type ProblemDescriptor } from '../shared/domain/phantom-definition';
export { type InversionProblem, type SimulatedData, type ProblemFamily, type DataLayout } from './problems/problem-family';
export { createTruthField, type TruthField } from './truth/truth-field';
export { TruthError } from './truth/truth-error';
export { phantomChecks, problemChecks, methodChecks, runChecks } from './checks/registry';
export { checkRun } from './checks/check-run';
export { type RunCheckContext } from './checks/run-check';
