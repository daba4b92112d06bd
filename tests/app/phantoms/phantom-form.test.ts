import { describe, expect, it } from 'vitest';
import { parseDecimal, shiftDecimal } from '../../../app/lib/decimal';
import { emptyEit } from '../../../app/features/phantoms/model/form-drafts';
import { formFromVersion } from '../../../app/features/phantoms/model/form-from-version';
import { emptyForm, storedForm, storeForm, type PhantomForm } from '../../../app/features/phantoms/model/phantom-form';
import { readDefinition, readForm, sealRange } from '../../../app/features/phantoms/model/form-request';
import { frameFacts } from '../../../app/features/phantoms/model/geometry-facts';
import { phantomDefinitionSchema, type PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { frameSize, patternCount } from '../../../solvers/problems/electrical-impedance/patterns';

const now = new Date('2026-12-01T12:00:00Z');
const complete = (patch: Partial<PhantomForm> = {}): PhantomForm => ({ ...emptyForm('tarn-soil-physics'), name: 'Three bodies', licence: 'CC-BY-4.0', ...patch });

describe('reading numbers', () => {
  it('takes a comma and a real minus, refuses words and bits of numbers', () => {
    expect(parseDecimal(' -0,5 ')).toBe(-0.5);
    expect(parseDecimal('\u221254')).toBe(-54);
    expect(parseDecimal('1e-3')).toBe(0.001);
    for (const text of ['', '-', '1.2.3', 'twelve', '0x10', 'Infinity']) expect(parseDecimal(text)).toBeNaN();
  });

  it('shifts the decimal point to the nearest double of the shifted decimal', () => {
    // The literals are the outside reference: a product with 0.001 misses some of them by one unit in the last place.
    expect(shiftDecimal(54.3, -3)).toBe(0.0543);
    expect(shiftDecimal(150, -3)).toBe(0.15);
    expect(shiftDecimal(34, -2)).toBe(0.34);
    expect(shiftDecimal(1e-7, 3)).toBe(1e-4);
  });
});

describe('the phantom form', () => {
  it('gives a definition that the contract accepts, in SI units', () => {
    const { definition, issues } = readDefinition(complete());
    expect(issues).toEqual([]);
    expect(phantomDefinitionSchema.parse(definition)).toEqual(definition);
    expect(definition?.geometry).toMatchObject({ body: { radius: 0.15 }, electrodeCoverage: 0.34, current: 0.005, contactImpedance: 0.0024 });
    expect(definition?.truth).toMatchObject({ kind: 'shapes', shapes: [{ kind: 'ellipse', x: -0.054, y: 0.039, semiAxisA: 0.041, angleDeg: 29, value: 2 }, { value: 0.38 }] });
  });

  it('comes back from a stored definition unchanged, so that the content hash stays', () => {
    const { definition } = readDefinition(complete({
      shapes: [
        ...emptyForm().shapes,
        { id: 'p', kind: 'polygon', label: 'Wedge', target: false, x: '10', y: '-20', a: '', b: '', angle: '0', value: '1.5', vertices: [['0', '0'], ['30', '0'], ['0', '25']] },
        { id: 'r', kind: 'annulus', label: 'Ring', target: true, x: '0', y: '0', a: '90', b: '100', angle: '0', value: '0.5', vertices: [] },
      ],
    }));
    const stored = { name: 'x', description: '', licence: 'CC0-1.0', definition: definition as PhantomDefinition, sealedUntil: null, frames: null };
    const again = readDefinition(formFromVersion('g', stored as Parameters<typeof formFromVersion>[1]));
    expect(again.definition).toEqual(definition);
  });

  it('names the limit and a value that works, at the path of the request', () => {
    const { issues } = readDefinition(complete({ eit: { ...emptyEit, contactImpedance: '50', radius: 'wide' } }));
    expect(issues).toContainEqual({ path: 'definition.geometry.contactImpedance', label: 'Contact impedance', message: 'At most 10 Ω m². 0.0024 works.' });
    expect(issues).toContainEqual({ path: 'definition.geometry.body.radius', label: 'Body radius', message: 'Write a number, for example 150.' });
  });

  it('refuses a shape that reaches the edge and an annulus turned inside out', () => {
    const [lobe] = emptyForm().shapes;
    const { issues } = readDefinition(complete({ shapes: [{ ...lobe!, x: '-130' }, { ...lobe!, id: '2', kind: 'annulus', label: 'Ring', x: '0', y: '0', a: '50', b: '40' }] }));
    expect(issues.map((i) => i.path)).toEqual(['definition.truth.shapes.0.x', 'definition.truth.shapes.1.innerRadius']);
    expect(issues[0]!.message).toContain('reaches the edge');
  });

  it('keeps measured frames locked until the statement is complete', () => {
    const living = complete({ framesOrigin: 'living', ethicsApproved: true, deidentified: true });
    expect(readForm(living, 'new', now).issues).toContainEqual(expect.objectContaining({ path: 'frames.ethicsReference' }));
    const upload = { sha256: 'a'.repeat(64), frames: 3, valuesPerFrame: 208, min: 0, max: 1, fileName: 'f.csv', fileSize: 10, referenceNorm: 1, largestChange: 0.1 };
    const filled = readForm({ ...living, frames: upload, ethicsReference: 'Board 7', currentWithinStandard: true }, 'new', now);
    expect(filled.issues).toEqual([]);
    expect(filled.terms?.frames).toMatchObject({ origin: 'living', ethicsReference: 'Board 7', valuesPerFrame: 208 });
    const short = readForm({ ...living, frames: { ...upload, valuesPerFrame: 200 }, ethicsReference: 'Board 7', currentWithinStandard: true }, 'new', now);
    expect(short.issues[0]).toMatchObject({ path: 'frames.sha256', message: expect.stringContaining('this geometry has 208') });
  });

  it('takes a sealing date from tomorrow to two years ahead', () => {
    expect(sealRange(now)).toEqual({ earliest: '2026-12-02', latest: '2028-12-01' });
    const at = (sealedUntil: string) => readForm(complete({ sealed: true, sealedUntil }), 'new', now).issues.map((i) => i.path);
    expect(at('2026-11-12')).toEqual(['sealedUntil']);
    expect(at('2029-01-01')).toEqual(['sealedUntil']);
    expect(at('2027-03-01')).toEqual([]);
  });

  it('keeps unsent input in the session and drops what it cannot read', () => {
    const values = new Map<string, string>();
    const storage = { getItem: (k: string) => values.get(k) ?? null, setItem: (k: string, v: string) => void values.set(k, v), removeItem: (k: string) => void values.delete(k) };
    Object.defineProperty(window, 'sessionStorage', { value: storage, configurable: true });
    storeForm('new', complete({ name: 'Half typed', eit: { ...emptyEit, radius: '12.' } }));
    expect(storedForm('new')).toMatchObject({ name: 'Half typed', eit: { radius: '12.' } });
    values.set('hadamark.phantom-form.new', '{"name": 3}');
    expect(storedForm('new')).toBeNull();
  });

  it('counts the values of a frame as the forward model does', () => {
    for (const electrodes of [8, 16, 32] as const)
      for (const pattern of ['adjacent', 'trigonometric'] as const)
        for (const measurement of ['adjacent-undriven', 'adjacent-all', 'electrode-voltages'] as const) {
          if (pattern === 'trigonometric' && measurement === 'adjacent-undriven') continue;
          const geometry = { electrodes, pattern, measurement, current: 1 };
          expect(frameFacts(geometry)).toMatchObject({ values: frameSize(geometry), patterns: patternCount(geometry) });
        }
    // 16 electrodes, adjacent drive and measurement without driven electrodes: 208 values, half independent (common practice).
    expect(frameFacts({ electrodes: 16, pattern: 'adjacent', measurement: 'adjacent-undriven', current: 1 })).toMatchObject({ values: 208, independent: 104 });
  });
});
