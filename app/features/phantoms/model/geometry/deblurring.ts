import { parseDecimal, shiftDecimal } from '../../../../lib/decimal';
import type { DeblurringDraft } from '../form-drafts';
import { geometryPath, numberIssue, type FormIssue } from '../form-issue';

const g = geometryPath;
const metres = (text: string): number => shiftDecimal(parseDecimal(text), -3);

export function deblurringIssues(draft: DeblurringDraft): FormIssue[] {
  const smaller = Math.min(parseDecimal(draft.width), parseDecimal(draft.height));
  return [
    numberIssue({ path: `${g}.body.width`, label: 'Width', text: draft.width, minimum: 1, maximum: 20_000, unit: 'mm', works: '100' }),
    numberIssue({ path: `${g}.body.height`, label: 'Height', text: draft.height, minimum: 1, maximum: 20_000, unit: 'mm', works: '100' }),
    numberIssue({ path: `${g}.spread`, label: 'Spread', text: draft.spread, minimum: 1e-3, maximum: Number.isFinite(smaller) ? smaller / 2 : 10_000, unit: 'mm', works: '3' }),
    draft.pointSpread === 'motion' ? numberIssue({ path: `${g}.motionDeg`, label: 'Direction', text: draft.motionDeg, minimum: -360, maximum: 360, unit: '°', works: '0' }) : null,
    numberIssue({ path: `${g}.cells`, label: 'Pixels', text: draft.cells, minimum: 8, maximum: 96, unit: '', works: '32', whole: true }),
  ].filter((issue) => issue !== null);
}

export function deblurringGeometry(draft: DeblurringDraft): unknown {
  return {
    body: { kind: 'rectangle', width: metres(draft.width), height: metres(draft.height) }, pointSpread: draft.pointSpread, spread: metres(draft.spread),
    ...(draft.pointSpread === 'motion' ? { motionDeg: parseDecimal(draft.motionDeg) } : {}), cells: parseDecimal(draft.cells), edge: draft.edge,
  };
}

/** Pixels across and down: `cells` along the longer side. NaN while the fields are no numbers. */
export function pixelCounts(draft: DeblurringDraft): [columns: number, rows: number] {
  const width = parseDecimal(draft.width);
  const height = parseDecimal(draft.height);
  const cells = parseDecimal(draft.cells);
  const other = (share: number): number => Math.max(1, Math.round(cells * share));
  return width >= height ? [cells, other(height / width)] : [other(width / height), cells];
}
