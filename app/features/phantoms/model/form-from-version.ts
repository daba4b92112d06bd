import { decimalText, shiftDecimal } from '../../../lib/decimal';
import type { PhantomVersionDetail } from '../../../../shared/contracts/phantoms';
import type { DeblurringGeometry } from '../../../../shared/domain/geometry/deblurring';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { IntegralEquationGeometry } from '../../../../shared/domain/geometry/integral-equation';
import type { XrayGeometry } from '../../../../shared/domain/geometry/x-ray';
import type { TruthDefinition } from '../../../../shared/domain/truth-definition';
import { fromShape } from './draft-shape';
import { emptyDeblurring, emptyEit, emptyEquation, emptyXray, type DeblurringDraft, type EitDraft, type EquationDraft, type TruthDraft, type XrayDraft } from './form-drafts';
import { emptyForm, type PhantomForm } from './phantom-form';

const mm = (metres: number): string => decimalText(shiftDecimal(metres, 3));
const list = (values: readonly number[]): string => values.map(decimalText).join(', ');

function eitDraft(g: EitGeometry): EitDraft {
  const outline: Partial<EitDraft> = g.body.kind === 'star' ? { outline: 'star', cosine: list(g.body.cosine), sine: list(g.body.sine) } : { outline: 'disc' };
  return {
    ...emptyEit, ...outline, radius: mm(g.body.radius), electrodes: String(g.electrodes), coverage: decimalText(shiftDecimal(g.electrodeCoverage, 2)),
    firstElectrodeDeg: decimalText(g.firstElectrodeDeg), numbering: g.numbering, ...(g.electrodeAnglesDeg ? { placing: 'listed', angles: list(g.electrodeAnglesDeg) } : {}),
    ...(Array.isArray(g.contactImpedance) ? { contacts: 'each', contactImpedances: list(g.contactImpedance) } : { contactImpedance: decimalText(g.contactImpedance) }),
    pattern: g.pattern, ...(g.skip === undefined ? {} : { skip: String(g.skip) }), ...(g.currents ? { currents: g.currents.map(list).join('\n') } : {}),
    current: decimalText(shiftDecimal(g.current, 3)), measurement: g.measurement,
  };
}

const xrayDraft = (g: XrayGeometry): XrayDraft => ({
  ...emptyXray, radius: mm(g.body.radius), beam: g.beam, views: String(g.views), firstAngleDeg: decimalText(g.firstAngleDeg), arcDeg: decimalText(g.arcDeg), detectors: String(g.detectors), detectorSpacing: mm(g.detectorSpacing),
  ...(g.sourceDistance === undefined ? {} : { sourceDistance: mm(g.sourceDistance) }), ...(g.detectorDistance === undefined ? {} : { detectorDistance: mm(g.detectorDistance) }), cells: String(g.cells),
});
const equationDraft = (g: IntegralEquationGeometry): EquationDraft => ({
  ...emptyEquation, equation: g.equation, cells: String(g.cells), points: String(g.points),
  ...(g.depth === undefined ? {} : { depth: decimalText(g.depth) }), ...(g.diffusivity === undefined ? {} : { diffusivity: decimalText(g.diffusivity) }),
});
const deblurringDraft = (g: DeblurringGeometry): DeblurringDraft => ({
  ...emptyDeblurring, width: mm(g.body.width), height: mm(g.body.height), pointSpread: g.pointSpread, spread: mm(g.spread), ...(g.motionDeg === undefined ? {} : { motionDeg: decimalText(g.motionDeg) }), cells: String(g.cells), edge: g.edge,
});

function geometryDraft(definition: PhantomVersionDetail['definition']): Partial<PhantomForm> {
  switch (definition.family) {
    case 'electrical-impedance':
      return { eit: eitDraft(definition.geometry) };
    case 'x-ray':
      return { xray: xrayDraft(definition.geometry) };
    case 'integral-equation':
      return { equation: equationDraft(definition.geometry) };
    case 'deblurring':
      return { deblurring: deblurringDraft(definition.geometry) };
  }
}

function truthDraft(truth: TruthDefinition): Partial<TruthDraft> {
  const background = decimalText(truth.background);
  if (truth.kind === 'standard') return { truthKind: 'standard', background };
  if (truth.kind === 'shapes') return { truthKind: 'shapes', background, shapes: truth.shapes.map(fromShape), combine: 'combine' in truth && truth.combine === 'add' ? 'add' : 'replace' };
  if (truth.kind === 'expression') return { truthKind: 'expression', background, expression: truth.expression };
  return {
    truthKind: 'array', background, scale: decimalText(truth.scale), offset: decimalText(truth.offset),
    extent: { xMin: mm(truth.extent.xMin), xMax: mm(truth.extent.xMax), yMin: mm(truth.extent.yMin), yMax: mm(truth.extent.yMax) },
    array: { sha256: truth.sha256, rows: truth.rows, cols: truth.cols, min: Number.NaN, max: Number.NaN, mean: Number.NaN, format: 'npy', fileName: '', fileSize: 0 },
  };
}

/** A stored version as the form shows it. A sealed truth that the reader may not see leaves the shapes empty. */
export function formFromVersion(group: string, version: PhantomVersionDetail): PhantomForm {
  const { definition } = version;
  const frames: Partial<PhantomForm> = version.frames
    ? { framesOrigin: version.frames.origin, instrument: version.frames.instrument, frames: { ...version.frames, min: 0, max: 0, fileName: '', fileSize: 0, referenceNorm: 0, largestChange: 0 } }
    : {};
  return {
    ...emptyForm(group, definition.family), name: version.name, description: version.description, licence: version.licence,
    dataKind: definition.dataKind, noiseReference: definition.noiseReference,
    sealed: version.sealedUntil !== null, sealedUntil: version.sealedUntil ?? '', shapes: [],
    ...geometryDraft(definition), ...frames, ...(definition.truth ? truthDraft(definition.truth) : {}),
  };
}
