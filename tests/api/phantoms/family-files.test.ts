import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { geometryWords } from '../../../api/services/phantoms/geometry-words.ts';
import { phantomListSchema } from '../../../shared/contracts/phantoms.ts';
import { simulationSchema } from '../../../shared/contracts/simulations.ts';
import { phantomDefinitionSchema, type PhantomDefinition } from '../../../shared/domain/phantom-definition.ts';
import type { HttpClient } from '../../support/http-client.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

let app: TestApp;
let curator: HttpClient;
let group: string;
beforeAll(async () => {
  app = await startTestApp();
  group = (await app.group('Tarn Soil Physics', { 'curator-demo': ['owner', 'curator'] })).slug;
  curator = await app.signInAs('curator-demo');
});
afterAll(() => app.stop());

const shapes = { kind: 'shapes', background: 0, shapes: [{ kind: 'ellipse', label: 'spot', value: 2, x: 0.01, y: 0, semiAxisA: 0.02, semiAxisB: 0.01 }] };
const inputs: Record<Exclude<PhantomDefinition['family'], 'electrical-impedance'>, object> = {
  'x-ray': { family: 'x-ray', truth: shapes, geometry: { body: { kind: 'disc', radius: 0.1 }, beam: 'parallel', views: 8, arcDeg: 180, detectors: 12, detectorSpacing: 0.02, cells: 12 } },
  'integral-equation': { family: 'integral-equation', truth: { kind: 'standard' }, geometry: { equation: 'shaw', cells: 16, points: 20 } },
  deblurring: { family: 'deblurring', truth: shapes, geometry: { body: { kind: 'rectangle', width: 0.1, height: 0.06 }, pointSpread: 'gaussian', spread: 0.005, cells: 20, edge: 'zero' } },
};
const values = { 'x-ray': 8 * 12, 'integral-equation': 20, deblurring: 20 * 12 } as const;
const families = Object.keys(inputs) as (keyof typeof inputs)[];

describe('the files of a version in every family', () => {
  for (const family of families)
    it(`name the data of ${family} and say nothing of electrodes`, async () => {
      const made = await curator.post('/api/v1/phantoms', { group, name: `One of ${family}`, licence: 'CC0-1.0', definition: inputs[family] });
      expect(made.status, made.text).toBe(201);
      const at = `/api/v1/phantoms/${(made.body as { slug: string }).slug}/versions/1`;
      const answer = await curator.get(`${at}/simulation`);
      expect(answer.status, answer.text).toBe(200);
      const simulation = simulationSchema.parse(answer.body);
      expect(simulation.clean).toHaveLength(values[family]);
      const table = await curator.get(`${at}/files/data.csv`);
      const [head, ...rows] = table.text.trim().split('\r\n').filter((line) => !line.startsWith('#'));
      expect(head).toBe(`number,${{ 'x-ray': 'view', 'integral-equation': 'curve', deblurring: 'row' }[family]},value,reference,frame,clean`);
      expect(rows.map((row) => Number(row.split(',').at(-1)))).toEqual(simulation.clean);
      expect((await curator.get(`${at}/files/voltages.csv`)).status).toBe(404);
      const readme = (await curator.get(`${at}/files/README.txt`)).text;
      expect(readme).toContain('data.csv');
      expect(readme).toContain(geometryWords(phantomDefinitionSchema.parse(inputs[family]))[0]!);
      for (const word of [/electrode/i, /voltage/i, /conductiv/i, /\bS\/m\b/, / V[.;: ]/]) expect(readme).not.toMatch(word);
      const cookie = [...curator.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
      const truth = Buffer.from(await (await fetch(`${app.url}${at}/files/truth.npy`, { headers: { cookie } })).arrayBuffer());
      const { nx, ny, body } = simulation.grid;
      expect(truth.subarray(0, 128).toString('latin1')).toContain(`'shape': (${ny}, ${nx})`);
      expect(body?.kind).toBe({ 'x-ray': 'disc', 'integral-equation': 'interval', deblurring: 'rectangle' }[family]);
    });

  it('are listed by family', async () => {
    const { items } = phantomListSchema.parse((await curator.get('/api/v1/phantoms?family=deblurring')).body);
    expect(items.map((p) => p.name)).toEqual(['One of deblurring']);
  });
});
