import { AxisCaseEntity, BenchEntity, BenchPhantomEntity, EntryEntity } from './bench.ts';
import { CounterEntity } from './counter.ts';
import { PhantomEntity, PhantomVerdictEntity, PhantomVersionEntity } from './phantom.ts';
import { CommentEntity, RecomputationEntity, RunEntity, RunImageEntity, TrialEntity, VerdictEntity } from './run.ts';
import { SimulationEntity } from './simulation.ts';
import { SolverEntity, SolverVersionEntity } from './solver.ts';
import { ArrayEntity, ArrayUploadEntity } from './stored-array.ts';

/** Entities of the registry itself; accounts, groups and the trail are listed beside them in the ORM's configuration. */
export const domainEntities = [
  CounterEntity,
  ArrayEntity,
  ArrayUploadEntity,
  PhantomEntity,
  PhantomVersionEntity,
  PhantomVerdictEntity,
  SimulationEntity,
  SolverEntity,
  SolverVersionEntity,
  BenchEntity,
  BenchPhantomEntity,
  AxisCaseEntity,
  EntryEntity,
  RunEntity,
  TrialEntity,
  RunImageEntity,
  VerdictEntity,
  CommentEntity,
  RecomputationEntity,
];
