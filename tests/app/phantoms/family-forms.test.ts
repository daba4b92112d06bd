import { describe, expect, it } from 'vitest';
import { changeFamily, emptyForm, type PhantomForm } from '../../../app/features/phantoms/model/phantom-form';
import { formFromVersion } from '../../../app/features/phantoms/model/form-from-version';
import { fieldPath, labelOf, readDefinition } from '../../../app/features/phantoms/model/form-request';
import { valuesPerFrame } from '../../../app/features/phantoms/model/form-geometry';
import { parseNumbers } from '../../../app/features/phantoms/model/form-issue';
import { emptyDeblurring, emptyEit, emptyEquation, emptyXray } from '../../../app/features/phantoms/model/form-drafts';
import { familyKeys, type FamilyKey } from '../../../shared/domain/families';
import { equationKeys } from '../../../shared/domain/geometry/integral-equation';
import { phantomDefinitionSchema, type PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { layoutSize } from '../../../solvers/problems/problem-family';
import { dataLayout } from '../../../solvers/problems/registry';

type Stored = Parameters<typeof formFromVersion>[1];
const stored = (definition: PhantomDefinition): Stored => ({ name: 'x', description: '', licence: 'CC0-1.0', definition, sealedUntil: null, frames: null }) as Partial<Stored> as Stored;
const form = (family: FamilyKey, patch: Partial<PhantomForm> = {}): PhantomForm => ({ ...emptyForm('g', family), ...patch });

const angles = Array.from({ length: 8 }, (_, l) => 90 - 45 * l + (l % 2));
const currents = '1 -1 0 0 0 0 0 0\n0 0 1 -1 0 0 0 0';
/** Forms beyond the defaults: every option that changes what is sent. */
const variants: readonly (readonly [string, PhantomForm])[] = [
  ['a star, listed angles, a contact impedance for each and listed currents', form('electrical-impedance', {
    shapes: [], eit: { ...emptyEit, outline: 'star', cosine: '0, 0.06', sine: '0.03', electrodes: '8', placing: 'listed', angles: angles.join(' '), contacts: 'each', contactImpedances: Array.from({ length: 8 }, (_, l) => `0.00${l + 1}`).join('; '), pattern: 'listed', currents, measurement: 'adjacent-undriven' },
  })],
  ['pairs that skip', form('electrical-impedance', { eit: { ...emptyEit, pattern: 'skip', skip: '3' } })],
  ['opposite pairs and absolute data', form('electrical-impedance', { eit: { ...emptyEit, pattern: 'opposite', electrodes: '12' }, dataKind: 'absolute' })],
  ['a fan beam and values that add', form('x-ray', { combine: 'add', xray: { ...emptyXray, beam: 'fan', arcDeg: '360' } })],
  ['an expression in two variables', form('x-ray', { truthKind: 'expression' })],
  ['an expression in one variable', form('integral-equation', { truthKind: 'expression' })],
  ...equationKeys.map((equation): [string, PhantomForm] => [`the equation ${equation}`, form('integral-equation', { equation: { ...emptyEquation, equation } })]),
  ['motion on a wide picture', form('deblurring', { deblurring: { ...emptyDeblurring, width: '160', height: '90', pointSpread: 'motion', motionDeg: '30', spread: '4' } })],
];

describe('the phantom form of every family', () => {
  for (const family of familyKeys)
    it(`begins with a complete ${family} phantom`, () => {
      const { definition, issues } = readDefinition(form(family));
      expect(issues).toEqual([]);
      expect(phantomDefinitionSchema.parse(definition)).toEqual(definition);
      expect(definition?.family).toBe(family);
    });

  for (const [name, typed] of variants)
    it(`sends ${name} and reads it back unchanged, so that the content hash stays`, () => {
      const { definition, issues } = readDefinition(typed);
      expect(issues).toEqual([]);
      expect(readDefinition(formFromVersion('g', stored(definition!))).definition).toEqual(definition);
    });

  for (const [name, typed] of [...variants, ...familyKeys.map((family) => [family, form(family)] as const)])
    it(`counts the values of a frame as the forward model does: ${name}`, () => {
      const { definition } = readDefinition(typed);
      expect(valuesPerFrame(typed)).toBe(layoutSize(dataLayout(definition!)));
    });

  it('keeps each family\'s ground truth while another is open', () => {
    const typed = form('electrical-impedance', { background: '1.3', expression: '2 + x' });
    const xray = { ...typed, ...changeFamily(typed, 'x-ray') };
    expect(xray).toMatchObject({ family: 'x-ray', background: '0', dataKind: 'absolute', noiseReference: 'data' });
    expect({ ...xray, ...changeFamily(xray, 'electrical-impedance') }).toMatchObject({ family: 'electrical-impedance', background: '1.3', expression: '2 + x', dataKind: 'difference', noiseReference: 'voltages' });
  });
});

describe('faults at the fields of a geometry', () => {
  const faults = (typed: PhantomForm) => readDefinition(typed).issues.map((i) => [i.path.replace('definition.geometry.', ''), i.message]);
  it('name the limit and a value that works', () => {
    expect(faults(form('x-ray', { xray: { ...emptyXray, views: '0', detectors: '12.5' } }))).toEqual([['views', 'At least 1. 60 works.'], ['detectors', 'A whole number, for example 64.']]);
    expect(faults(form('deblurring', { deblurring: { ...emptyDeblurring, spread: '80' } }))).toEqual([['spread', 'At most 50 mm. 3 works.']]);
    expect(faults(form('integral-equation', { equation: { ...emptyEquation, equation: 'gravity', depth: '9' } }))).toEqual([['depth', 'At most 2. 0.25 works.']]);
  });
  it('say how many entries a list needs, and which entry is no number', () => {
    expect(faults(form('electrical-impedance', { eit: { ...emptyEit, placing: 'listed', angles: '90 45' } }))).toEqual([['electrodeAnglesDeg', 'List 16 angles, one an electrode; there are 2.']]);
    expect(faults(form('electrical-impedance', { eit: { ...emptyEit, contacts: 'each', contactImpedances: '0.1 x' } }))).toEqual([['contactImpedance', 'Entry 2 is not a number. 0.0024, 0.0030, … works.']]);
    expect(faults(form('electrical-impedance', { eit: { ...emptyEit, pattern: 'listed', electrodes: '8', currents: '1 0 0 0 0 0 0 0' } }))).toEqual([['currents', 'The currents of line 1 must sum to zero, not 1.']]);
  });
  it('of the contract land at the list that holds the entry', () => {
    const { issues } = readDefinition(form('electrical-impedance', { eit: { ...emptyEit, electrodes: '8', placing: 'listed', angles: '0 1 90 135 180 225 270 315', numbering: 'counter-clockwise' } }));
    expect(issues.map((i) => i.path)).toEqual(['definition.geometry.electrodeAnglesDeg']);
    expect(fieldPath('definition.geometry.currents.3')).toBe('definition.geometry.currents');
    expect(labelOf('definition.geometry.body.sine.0')).toBe('Sine coefficients');
  });
  it('let a shape reach beyond a picture but not beyond a body', () => {
    const wide = { ...emptyForm('g', 'deblurring').shapes[0]!, x: '60' };
    expect(readDefinition(form('deblurring', { shapes: [wide] })).issues).toEqual([]);
    expect(readDefinition(form('x-ray', { shapes: [{ ...wide, x: '95' }] })).issues.map((i) => i.path)).toEqual(['definition.truth.shapes.0.x']);
  });
});

describe('a list of numbers', () => {
  it('takes spaces, commas, semicolons and decimal commas', () => {
    expect(parseNumbers('1, 2;3  4\n5')).toEqual([1, 2, 3, 4, 5]);
    expect(parseNumbers('0.1,0.2,-0.3')).toEqual([0.1, 0.2, -0.3]);
    expect(parseNumbers('0,5 1,25')).toEqual([0.5, 1.25]);
    expect(parseNumbers('')).toEqual([]);
    expect(parseNumbers('1 two')[1]).toBeNaN();
  });
});
