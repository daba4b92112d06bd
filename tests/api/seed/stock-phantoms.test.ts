import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { readArrayFile } from '../../../api/services/files/read-upload.ts';
import { slugify } from '../../../api/services/identifiers.ts';
import { demoPlan } from '../../../api/services/seed/demo-plan.ts';
import { readStockPhantom, stockFolder } from '../../../api/services/seed/stock-phantoms.ts';
import { checkConfiguration, whyUnfit } from '../../../api/services/solvers/check-configuration.ts';
import { axisWords, levelsFault } from '../../../shared/domain/axes.ts';
import { familyKeys } from '../../../shared/domain/families.ts';
import { can } from '../../../shared/domain/permissions.ts';
import { contentHash, sha256Hex } from '../../../solvers/core/hash.ts';
import { getMethod } from '../../../solvers/methods/registry.ts';
import { demoAccounts } from '../../../api/sign-in/demo-accounts.ts';

const folders = readdirSync(stockFolder());

describe('stock phantoms', () => {
  for (const folder of folders) {
    it(`${folder}: SOURCE.md names the origin, the licence and the hash of what is beside it`, async () => {
      const stock = await readStockPhantom(folder);
      const source = readFileSync(join(stockFolder(), folder, 'SOURCE.md'), 'utf8');
      expect(source).toContain(contentHash(stock.definition));
      expect(source).toContain(stock.licence);
      expect(source).toContain('Origin:');
      expect(stock.description.length).toBeGreaterThan(80);
      const { truth } = stock.definition;
      if (truth.kind !== 'array') return;
      const table = readArrayFile(stock.values!.name, stock.values!.bytes);
      expect([table.rows, table.cols]).toEqual([truth.rows, truth.cols]);
      expect(sha256Hex(table.values)).toBe(truth.sha256);
      expect(source).toContain(truth.sha256);
    });
  }
});

describe('the demonstration plan', () => {
  const rolesOf = (handle: string): Record<string, readonly ('owner' | 'curator' | 'developer' | 'observer')[]> =>
    Object.fromEntries(demoPlan.groups.map((group) => [group.slug, [...(group.owner === handle ? (['owner'] as const) : []), ...group.members.filter((member) => member.handle === handle).flatMap((member) => member.roles)]]));
  const actor = (handle: string) => {
    const account = demoAccounts.find((candidate) => candidate.handle === handle);
    expect(account, handle).toBeDefined();
    const groups = Object.fromEntries(Object.entries(rolesOf(handle)).filter(([, roles]) => roles.length > 0));
    return { id: handle, siteRoles: account!.siteRoles, groups };
  };

  it('has every person do only what their roles allow', () => {
    for (const phantom of demoPlan.phantoms) {
      expect(can(actor(phantom.curator), 'phantom.create', { groupId: phantom.group }), phantom.folder).toBe(true);
      if (phantom.published) expect(can(actor(phantom.published.by), 'phantom.review', { groupId: phantom.group }), phantom.folder).toBe(true);
    }
    for (const solver of demoPlan.solvers) expect(can(actor(solver.developer), 'solver.create', { groupId: solver.group }), solver.key).toBe(true);
    for (const bench of demoPlan.benches) {
      expect(can(actor(bench.curator), 'bench.create', { groupId: bench.group }), bench.key).toBe(true);
      for (const entry of bench.entries) {
        const solver = demoPlan.solvers.find((candidate) => candidate.key === entry.solver)!;
        expect(can(actor(entry.by), 'entry.create', { groupId: solver.group }), `${bench.key} ${entry.solver}`).toBe(true);
      }
    }
    for (const review of demoPlan.reviews) {
      const solver = demoPlan.solvers.find((candidate) => candidate.key === review.solver)!;
      const phantom = demoPlan.phantoms.find((candidate) => candidate.folder === review.phantom)!;
      const reviewers = [review.verdict?.by, review.taken].filter((handle): handle is string => handle !== undefined);
      for (const handle of reviewers) expect(can(actor(handle), 'run.review', { interestedGroupIds: [solver.group, phantom.group] }), `${handle} on ${review.solver}, ${review.phantom}`).toBe(true);
    }
  });

  it('enters only configurations that their methods take, on phantoms they fit', async () => {
    for (const solver of demoPlan.solvers) {
      for (const { configuration } of [solver, ...(solver.versions ?? [])]) expect(() => checkConfiguration(configuration), solver.key).not.toThrow();
    }
    for (const bench of demoPlan.benches) {
      const definitions = await Promise.all(bench.phantoms.map(async (folder) => (await readStockPhantom(folder)).definition));
      expect(new Set(definitions.map((definition) => definition.noiseReference)).size, bench.key).toBe(1);
      for (const entry of bench.entries) {
        const { configuration } = demoPlan.solvers.find((candidate) => candidate.key === entry.solver)!;
        for (const definition of definitions) expect(whyUnfit(configuration.method, definition)).toBeNull();
      }
    }
  });

  it('has a bench for every family, and benches on other axes than the noise whose levels are admissible', async () => {
    const families = await Promise.all(demoPlan.benches.map(async (bench) => (await readStockPhantom(bench.phantoms[0]!)).definition.family));
    expect(new Set(families)).toEqual(new Set(familyKeys));
    demoPlan.benches.forEach((bench, i) => {
      const key = bench.axis?.key ?? 'noise';
      expect(axisWords[key].families).toContain(families[i]);
      expect(levelsFault(key, bench.ladder), bench.key).toBeNull();
    });
    expect(demoPlan.benches.map((bench) => bench.axis?.key)).toEqual(expect.arrayContaining(['contrast', 'electrode-displacement']));
  });

  it('covers what the demonstration is to show', () => {
    const published = demoPlan.phantoms.filter((phantom) => phantom.published);
    expect(published.length).toBeGreaterThanOrEqual(5);
    expect(demoPlan.phantoms.filter((phantom) => !phantom.published)).toHaveLength(1);
    expect(published.filter((phantom) => phantom.sealedForDays !== undefined)).toHaveLength(1);
    expect(demoPlan.phantoms.map((phantom) => phantom.folder).sort()).toEqual([...folders].sort());
    const entered = new Set(demoPlan.benches.flatMap((bench) => bench.entries.map((entry) => entry.solver)));
    expect(new Set(demoPlan.solvers.map((solver) => solver.key))).toEqual(entered);
    expect(new Set(demoPlan.solvers.map((solver) => getMethod(solver.configuration.method).class))).toEqual(new Set(['spectral', 'iterative', 'variational', 'nonlinear', 'direct', 'statistical']));
    expect(new Set(demoPlan.reviews.flatMap((review) => review.verdict?.verdict ?? []))).toEqual(new Set(['signed-off', 'signed-off-with-reservation', 'returned']));
    const names = [...demoPlan.solvers.map((solver) => slugify(solver.name)), ...demoPlan.benches.map((bench) => slugify(bench.title))];
    expect(new Set(names).size).toBe(names.length);
    expect(names, 'an accent is no gap').toContain('calderon-s-linearisation');
  });
});
