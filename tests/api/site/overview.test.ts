import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { RunEntity } from '../../../api/entities/run.ts';
import { checkListSchema, methodListSchema, metricListSchema, noiseModelListSchema, ruleListSchema } from '../../../shared/contracts/catalogue.ts';
import { searchResultSchema } from '../../../shared/contracts/site.ts';
import { methods } from '../../../solvers/methods/registry.ts';
import { metrics } from '../../../solvers/metrics/registry.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
beforeAll(async () => {
  app = await startTestApp();
  bench = await makeBench(app, { title: 'Searchable bench', phantoms: 1, ladder: [0.01], draws: 2, entries: [{ solver: 'Findable solver', figures: () => ({ 'relative-l2-error': 0.5 }) }] });
});
afterAll(() => app.stop());

describe('catalogue', () => {
  it('lists every method with its parameters as fields and as JSON Schema', async () => {
    const { items } = methodListSchema.parse((await app.visitor.get('/api/v1/methods')).body);
    expect(items.map((item) => item.key)).toEqual(methods.map((method) => method.key));
    for (const item of items) {
      const properties = (item.parameterSchema as { properties?: Record<string, unknown> }).properties ?? {};
      expect(Object.keys(properties).sort(), item.key).toEqual(item.fields.map((field) => field.name).sort());
      for (const field of item.fields) expect(field.help, `${item.key}.${field.name}`).not.toBe('');
      expect(item.capabilities.rules.length > 0).toBe(item.defaultRule !== null);
    }
  });

  it('lists metrics, rules, noise models and checks with their sources', async () => {
    const metricList = metricListSchema.parse((await app.visitor.get('/api/v1/metrics')).body).items;
    expect(metricList.map((item) => item.key)).toEqual(metrics.map((metric) => metric.key));
    expect(metricList.every((item) => item.formula !== '' && item.sources.length > 0)).toBe(true);
    const rules = ruleListSchema.parse((await app.visitor.get('/api/v1/rules')).body).items;
    expect(rules.find((rule) => rule.key === 'discrepancy')).toMatchObject({ usesNoiseLevel: true });
    expect(rules.find((rule) => rule.key === 'gcv')).toMatchObject({ usesNoiseLevel: false });
    expect(rules.find((rule) => rule.key === 'gcv')!.methods).toContain('tikhonov');
    expect(noiseModelListSchema.parse((await app.visitor.get('/api/v1/noise-models')).body).items.map((item) => item.key)).toContain('gaussian');
    const checks = checkListSchema.parse((await app.visitor.get('/api/v1/checks')).body).items;
    expect(checks.find((check) => check.key === 'adjoint')).toMatchObject({ bound: 1e-10, comparison: 'at-most', appliesTo: 'problem' });
  });
});

describe('search', () => {
  const find = async (q: string) => searchResultSchema.parse((await app.visitor.get(`/api/v1/search?q=${encodeURIComponent(q)}`)).body).items;

  it('finds by name', async () => {
    expect((await find('searchable')).map((hit) => hit.kind)).toEqual(['phantom', 'bench']);
    expect(await find('findable')).toMatchObject([{ kind: 'solver', name: 'Findable solver', path: '/solvers/findable-solver' }]);
    expect((await find('tarn')).map((hit) => hit.kind)).toContain('group');
  });

  it('finds by identifier, in small letters too', async () => {
    const run = bench.entries[0]!.runs[0]!;
    expect(await find(run.toLowerCase())).toMatchObject([{ kind: 'run', id: run, path: `/runs/${run}` }]);
    expect(await find(bench.id)).toMatchObject([{ kind: 'bench', slug: bench.slug }]);
  });

  it('finds by the first digits of a hash', async () => {
    const run = await app.orm.em.fork().findOneOrFail(RunEntity, { id: bench.entries[0]!.runs[0]! });
    expect(await find(run.resultHash!.slice(0, 12))).toMatchObject([{ kind: 'run', id: run.id }]);
    expect(await find(run.phantomHash.slice(0, 10))).toMatchObject([{ kind: 'phantom', slug: bench.phantoms[0] }]);
  });

  it('shows no draft of another group, and takes signs literally', async () => {
    const developer = await app.signInAs('developer-demo');
    await developer.post('/api/v1/solvers', {
      group: 'holm-reference-methods', name: 'Findable draft', configuration: { method: 'cgls', parameters: {}, rule: null }, declaration: { notTuned: true, ownMesh: false }, register: false,
    });
    expect((await find('findable')).map((hit) => hit.name)).toEqual(['Findable solver']);
    expect(searchResultSchema.parse((await developer.get('/api/v1/search?q=findable')).body).items).toHaveLength(2);
    expect(await find("'; drop table run; --")).toEqual([]);
    expect((await app.visitor.get('/api/v1/search?q=x')).status).toBe(422);
  });
});
