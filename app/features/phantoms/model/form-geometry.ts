import type { Body } from '../../../../shared/domain/body';
import { bodySchema } from '../../../../shared/domain/body';
import { electrodeLayout, type ElectrodeLayout } from '../../../components/images/electrode-layout';
import { parseDecimal } from '../../../lib/decimal';
import { eitFrameFacts, eitGeometry, eitIssues, electrodeCount } from './geometry/electrical-impedance';
import { deblurringGeometry, deblurringIssues, pixelCounts } from './geometry/deblurring';
import { equationGeometry, equationIssues } from './geometry/integral-equation';
import { xrayGeometry, xrayIssues } from './geometry/x-ray';
import type { FormIssue } from './form-issue';
import { parseNumbers } from './form-issue';
import type { PhantomForm } from './phantom-form';

/** What of the form speaks of the geometry of its family. */
export function geometryIssues(form: PhantomForm): FormIssue[] {
  switch (form.family) {
    case 'electrical-impedance':
      return eitIssues(form.eit);
    case 'x-ray':
      return xrayIssues(form.xray);
    case 'integral-equation':
      return equationIssues(form.equation);
    case 'deblurring':
      return deblurringIssues(form.deblurring);
  }
}

export function geometryCandidate(form: PhantomForm): unknown {
  switch (form.family) {
    case 'electrical-impedance':
      return eitGeometry(form.eit);
    case 'x-ray':
      return xrayGeometry(form.xray);
    case 'integral-equation':
      return equationGeometry(form.equation);
    case 'deblurring':
      return deblurringGeometry(form.deblurring);
  }
}

/** The body that shapes are drawn on; null while its fields cannot be read, and for a line, which has no shapes. */
export function formBody(form: PhantomForm): Exclude<Body, { kind: 'interval' }> | null {
  if (form.family === 'integral-equation') return null;
  const { body } = geometryCandidate(form) as { body: unknown };
  const parsed = bodySchema.safeParse(body);
  return parsed.success && parsed.data.kind !== 'interval' ? parsed.data : null;
}

/** Electrodes for the pictures of the form; null for families without, or while the fields cannot be read. */
export function formElectrodes(form: PhantomForm): ElectrodeLayout | null {
  if (form.family !== 'electrical-impedance') return null;
  const { eit } = form;
  const body = formBody(form);
  if (!body || body.kind === 'rectangle') return null;
  const coverage = parseDecimal(eit.coverage) / 100;
  const first = parseDecimal(eit.firstElectrodeDeg);
  const angles = eit.placing === 'listed' ? parseNumbers(eit.angles).filter(Number.isFinite) : [];
  const electrodes = electrodeCount(eit);
  return electrodeLayout({
    body, electrodes, electrodeCoverage: coverage > 0 && coverage < 1 ? coverage : 0.5, firstElectrodeDeg: Number.isFinite(first) ? first : 90, numbering: eit.numbering,
    ...(angles.length === electrodes ? { electrodeAnglesDeg: angles } : {}),
  });
}

/** Values of one frame of the form's geometry; NaN while its fields cannot be read. */
export function valuesPerFrame(form: PhantomForm): number {
  switch (form.family) {
    case 'electrical-impedance':
      return eitFrameFacts(form.eit).values;
    case 'x-ray':
      return parseDecimal(form.xray.views) * parseDecimal(form.xray.detectors);
    case 'integral-equation':
      return parseDecimal(form.equation.points);
    case 'deblurring': {
      const [columns, rows] = pixelCounts(form.deblurring);
      return columns * rows;
    }
  }
}
