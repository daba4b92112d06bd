import { BenchEntity, BenchPhantomEntity, EntryEntity } from '../../api/entities/bench.ts';
import { toBlob } from '../../api/entities/float64-blob.ts';
import { GroupEntity } from '../../api/entities/group.ts';
import { PhantomEntity, PhantomVersionEntity } from '../../api/entities/phantom.ts';
import { RunEntity, TrialEntity } from '../../api/entities/run.ts';
import { SimulationEntity } from '../../api/entities/simulation.ts';
import { SolverEntity, SolverVersionEntity } from '../../api/entities/solver.ts';
import { UserEntity } from '../../api/entities/user.ts';
import { benchHash } from '../../api/services/benches/find-bench.ts';
import { nextId, slugify } from '../../api/services/identifiers.ts';
import type { ReviewState, RunState } from '../../shared/domain/states.ts';
import { phantomDefinitionSchema } from '../../shared/domain/phantom-definition.ts';
import { contentHash, sha256Hex } from '../../solvers/core/hash.ts';
import type { TestApp } from './test-app.ts';

/** Rows of a bench whose figures the test makes up by a formula of its own, so that it knows every answer. */
export interface MadeBench {
  readonly slug: string;
  readonly id: string;
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly phantoms: readonly string[];
  readonly entries: readonly { readonly solver: string; readonly runs: readonly string[] }[];
}

export interface MadeEntry {
  readonly solver: string;
  readonly group?: string;
  /** Figures of one trial by metric key; null where undefined. */
  readonly figures: (at: { readonly phantom: number; readonly level: number; readonly draw: number; readonly noise: number }) => Record<string, number | null>;
  readonly state?: RunState;
  readonly review?: ReviewState;
  readonly reservation?: string;
  /** Runs of these phantoms (by index) are left queued. */
  readonly unfinished?: readonly number[];
}

/** 16 electrodes, adjacent pairs, one disc of the given radius. */
export const discDefinition = (radius: number) =>
  phantomDefinitionSchema.parse({
    family: 'electrical-impedance', dataKind: 'difference', noiseReference: 'difference',
    truth: { kind: 'shapes', background: 1, shapes: [{ kind: 'ellipse', label: 'disc', value: 2, target: true, x: 0.02, y: 0.01, semiAxisA: radius, semiAxisB: radius }] },
    geometry: { body: { kind: 'disc', radius: 0.1 }, electrodes: 16, electrodeCoverage: 0.5, contactImpedance: 0.0005, pattern: 'adjacent', current: 0.01, measurement: 'adjacent-undriven' },
  });

const grid = { nx: 2, ny: 2, xMin: -0.1, xMax: 0.1, yMin: -0.1, yMax: 0.1, bodyRadius: 0.1 };

export interface BenchRequest {
  readonly title: string;
  readonly phantoms: number;
  readonly ladder: readonly number[];
  readonly draws: number;
  readonly entries: readonly MadeEntry[];
  readonly floor?: number;
  readonly trivial?: Record<string, number | null>;
  readonly phantomGroup?: string;
  readonly rankingMetric?: string;
  readonly sealedUntil?: string;
}

/** A published phantom version with a stored simulation of four pixels. */
export async function makePhantom(app: TestApp, input: { readonly name: string; readonly radius: number; readonly group: string; readonly floor?: number; readonly sealedUntil?: string | null }): Promise<{ slug: string; versionId: string }> {
  const em = app.orm.em.fork();
  const user = await app.account('curator-demo');
  const definition = discDefinition(input.radius);
  const hash = contentHash(definition);
  const group = await em.findOneOrFail(GroupEntity, { slug: input.group });
  const slug = slugify(input.name);
  const phantom = em.create(PhantomEntity, { id: await nextId(em, 'phantom'), slug, family: 'electrical-impedance', group: em.getReference(GroupEntity, group.id), name: input.name });
  const version = em.create(PhantomVersionEntity, {
    phantom, n: 1, state: 'published', name: input.name, description: '', licence: 'CC0-1.0', definition, definitionHash: hash, contentHash: hash,
    frames: null, sealedUntil: input.sealedUntil ?? null, createdBy: em.getReference(UserEntity, user.id), submittedBy: null, submittedAt: null,
    publishedAt: app.deps.clock(), withdrawnAt: null, withdrawnReason: null,
  });
  em.create(SimulationEntity, {
    contentHash: hash, codeVersion: 'test', modelErrorFloor: input.floor ?? 0.001, noiseScale: 1, checks: [], seconds: 1,
    summary: {
      dataKind: 'difference', noiseReference: 'difference', dataUnit: 'V', patterns: 1, valuesPerPattern: 2, patternNames: ['1–2'], channelNames: [['3–4', '4–5']], noiseScale: 1,
      largestChange: 1, grid, truthRange: [1, 2], background: 1, unit: 'S/m', targets: [], modelErrorFloor: input.floor ?? 0.001,
      simulation: { unknowns: 1, elements: 1, kind: 'made up by a test' }, inversion: { cells: 4, nodes: 9 },
    },
    frame: toBlob(Float64Array.of(1, 2)), reference: toBlob(Float64Array.of(1, 1)), clean: toBlob(Float64Array.of(0, 1)), truthImage: toBlob(Float64Array.of(1, 1, 2, 2)),
  });
  await em.flush();
  return { slug, versionId: version.id };
}

export async function makeBench(app: TestApp, request: BenchRequest): Promise<MadeBench> {
  const { ladder, draws } = request;
  const owners = new Map<string, string>();
  const groupOf = async (name: string): Promise<string> => {
    const known = owners.get(name) ?? (await app.orm.em.fork().findOne(GroupEntity, { slug: slugify(name) }))?.slug;
    const slug = known ?? (await app.group(name, { 'owner-demo': ['owner'], 'developer-demo': ['developer'], 'curator-demo': ['curator'] })).slug;
    owners.set(name, slug);
    return slug;
  };
  const phantomGroup = await groupOf(request.phantomGroup ?? 'Tarn Soil Physics');
  const phantoms: { slug: string; versionId: string }[] = [];
  for (let i = 0; i < request.phantoms; i++) {
    const radius = 0.01 + 0.0001 * i + 0.000001 * (sha256Hex(request.title).charCodeAt(0) + sha256Hex(request.title).charCodeAt(1) * 128);
    phantoms.push(await makePhantom(app, { name: `${request.title} phantom ${i + 1}`, radius, group: phantomGroup, floor: request.floor, sealedUntil: request.sealedUntil ?? null }));
  }
  const em = app.orm.em.fork();
  const user = em.getReference(UserEntity, (await app.account('developer-demo')).id);
  const versions = await em.find(PhantomVersionEntity, { id: { $in: phantoms.map((phantom) => phantom.versionId) } });
  const versionOf = (i: number) => versions.find((version) => version.id === phantoms[i]?.versionId)!;
  const rankingMetric = request.rankingMetric ?? 'relative-l2-error';
  const question = 'Which of them answers what the test asks?';
  const seed = 1;
  const bench = em.create(BenchEntity, {
    axis: { key: 'noise' },
    id: await nextId(em, 'bench'), slug: slugify(request.title), title: request.title, question, description: '', family: 'electrical-impedance',
    group: em.getReference(GroupEntity, (await em.findOneOrFail(GroupEntity, { slug: phantomGroup })).id), createdBy: user, ladder: [...ladder], draws, seed, rankingMetric,
    state: 'open', contentHash: benchHash({ axis: { key: 'noise' }, noiseModel: 'gaussian', question, phantomHashes: phantoms.map((_, i) => versionOf(i).contentHash), ladder, draws, seed, rankingMetric }), openedAt: app.deps.clock(), closedAt: null,
  });
  phantoms.forEach((_, position) => em.create(BenchPhantomEntity, { bench, phantomVersion: versionOf(position), position }));
  await em.flush();
  const entries: { solver: string; runs: string[] }[] = [];
  for (const [glyph, entry] of request.entries.entries()) {
    const group = await em.findOneOrFail(GroupEntity, { slug: await groupOf(entry.group ?? 'Holm Reference Methods') });
    const configuration = { method: 'tikhonov', parameters: { penalty: 'gradient', smallestAlpha: 1e-5 }, rule: { key: 'fixed' as const, value: 0.001 * (glyph + 1) } };
    const solver = em.create(SolverEntity, { id: await nextId(em, 'solver'), slug: slugify(entry.solver), name: entry.solver, description: '', group, glyph });
    const version = em.create(SolverVersionEntity, {
      solver, n: 1, state: 'registered', method: 'tikhonov', configuration, declaration: { notTuned: true, ownMesh: false, sourceMayBePublished: true }, contentHash: contentHash(configuration),
      createdBy: user, registeredAt: app.deps.clock(), withdrawnAt: null, withdrawnReason: null,
    });
    const row = em.create(EntryEntity, { bench, solverVersion: version, place: glyph, createdBy: user });
    const runs: string[] = [];
    for (let p = 0; p < phantoms.length; p++) {
      const id = await nextId(em, 'run');
      const finished = (entry.state ?? 'finished') === 'finished' && !entry.unfinished?.includes(p);
      em.create(RunEntity, {
        id, entry: row, phantomVersion: versionOf(p), submittedBy: user, state: finished ? 'finished' : (entry.state ?? 'finished') === 'finished' ? 'queued' : entry.state!, review: entry.review ?? 'unreviewed',
        reservation: entry.reservation ?? null, reviewer: null, configuration, ladder: [...ladder], draws, seed, phantomHash: versionOf(p).contentHash, codeVersion: 'test', priority: 0, done: finished ? ladder.length * draws : 0,
        total: ladder.length * draws, levelMedians: [], failure: entry.state === 'failed' ? 'At noise level 1 %, draw 1: made to fail by the test.' : null, queuedAt: app.deps.clock(), startedAt: null, heartbeatAt: null,
        finishedAt: finished ? new Date(app.deps.clock().getTime() + 1000 * p) : null, resultHash: finished ? sha256Hex(id) : null, secondsPerReconstruction: finished ? 0.001 * (glyph + 1) : null, timeRatio: finished ? glyph + 1 : null,
        checks: [], trivial: finished ? (request.trivial ?? { 'relative-l2-error': 1 }) : null,
      });
      runs.push(id);
      if (!finished) continue;
      ladder.forEach((noise, level) => {
        for (let draw = 0; draw < draws; draw++) {
          em.create(TrialEntity, {
            run: em.getReference(RunEntity, id), level, draw, metrics: entry.figures({ phantom: p, level, draw, noise }), reasons: null, supAt: [0.01, 0.02], parameter: 0.1, iterations: 0, forwardSolves: 0,
            stop: 'direct', noiseNorm: noise, seconds: 0.001, imageHash: sha256Hex(`${id}/${level}/${draw}`),
          });
        }
      });
    }
    entries.push({ solver: solver.slug, runs });
    await em.flush();
  }
  return { slug: bench.slug, id: bench.id, ladder, draws, phantoms: phantoms.map((phantom) => phantom.slug), entries };
}
