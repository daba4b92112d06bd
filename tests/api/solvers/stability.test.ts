import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { SolverVersionEntity } from '../../../api/entities/solver.ts';
import { solverDetailSchema, solverStabilitySchema } from '../../../shared/contracts/solvers.ts';
import { makeBench, type MadeBench } from '../../support/registry-fixture.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let bench: MadeBench;
const ladder = [0.001, 0.003, 0.01, 0.03, 0.1, 0.3];

beforeAll(async () => {
  app = await startTestApp();
  bench = await makeBench(app, {
    title: 'Stability bench', phantoms: 2, ladder, draws: 4, trivial: { 'relative-l2-error': 1 }, floor: 0.002,
    entries: [
      // A power law with a floor: E = 0.2 + 3 noise^0.7, the same in every draw.
      { solver: 'Power law', figures: ({ noise, phantom }) => ({ 'relative-l2-error': 0.2 + 3 * noise ** 0.7 * (1 + phantom) }), review: 'signed-off' },
      { solver: 'Other', figures: () => ({ 'relative-l2-error': 0.5 }) },
    ],
  });
});
afterAll(() => app.stop());

describe('stability of a solver version', () => {
  it('gives one sheet a phantom, with the law that the figures follow', async () => {
    const stability = solverStabilitySchema.parse((await app.visitor.get('/api/v1/solvers/power-law/versions/1/stability')).body);
    expect(stability.items.map((item) => item.phantom.slug)).toEqual(bench.phantoms);
    const [first] = stability.items;
    expect(first).toMatchObject({ trivial: 1, modelErrorFloor: 0.002, sheet: { model: 'power' } });
    // Draws do not differ, so the fit is exact up to the refinement of its grid of exponents (one part in a hundred).
    expect(first!.sheet.exponent!.value).toBeCloseTo(0.7, 2);
    expect(first!.sheet.floor!.value).toBeCloseTo(0.2, 2);
    // 0.2 + 3 d^0.7 = 1 at d = (0.8 / 3)^(1 / 0.7) = 0.1514; between levels in log-log the curve is not straight: a few per cent.
    expect(first!.sheet.breakdown!.value / (0.8 / 3) ** (1 / 0.7)).toBeGreaterThan(0.93);
    expect(first!.sheet.breakdown!.value / (0.8 / 3) ** (1 / 0.7)).toBeLessThan(1.07);
    expect(first!.levels[2]!.median).toBeCloseTo(0.2 + 3 * 0.01 ** 0.7, 12);
  });

  it('has no law for a metric without figures, and refuses an unknown one', async () => {
    const stability = solverStabilitySchema.parse((await app.visitor.get('/api/v1/solvers/power-law/versions/1/stability?metric=amplitude-response')).body);
    expect(stability.items[0]!.sheet).toMatchObject({ model: 'none', exponent: null });
    expect((await app.visitor.get('/api/v1/solvers/power-law/versions/1/stability?metric=charm')).status).toBe(422);
    expect((await app.visitor.get('/api/v1/solvers/power-law/versions/7/stability')).status).toBe(404);
  });
});

describe('a solver on benches', () => {
  it('shows its entries and counts its runs', async () => {
    const solver = solverDetailSchema.parse((await app.visitor.get('/api/v1/solvers/power-law')).body);
    expect(solver.current).toMatchObject({ runs: 2, signedOff: 2 });
    expect(solver.entries).toMatchObject([{ bench: { slug: bench.slug, state: 'open' }, version: 1, runs: [{ review: 'signed-off' }, { review: 'signed-off' }] }]);
  });

  it('is refused with the reason where its method does not fit', async () => {
    const em = app.orm.em.fork();
    // As after an upgrade that dropped a method: what was registered stays, but it cannot run.
    await em.nativeUpdate(SolverVersionEntity, { solver: { slug: 'other' } }, { method: 'dropped-method' });
    const other = await makeBench(app, { title: 'Fit bench', phantoms: 1, ladder: [0.01], draws: 1, entries: [] });
    const developer = await app.signInAs('developer-demo');
    const answer = await developer.post(`/api/v1/benches/${other.slug}/entries`, { solver: 'other', version: 1 });
    expect(answer.status).toBe(422);
    expect((answer.body as { issues: { message: string }[] }).issues[0]!.message).toBe("On 'Fit bench phantom 1': The method 'dropped-method' is not in this version of the code.");
  });
});
