import { parseDecimal } from '../../../../lib/decimal';
import type { IntegralEquationGeometry } from '../../../../../shared/domain/geometry/integral-equation';
import { equationOf } from '../../../../../solvers/problems/integral-equation/equations';
import type { EquationDraft } from '../form-drafts';
import { geometryPath, numberIssue, type FormIssue } from '../form-issue';

const g = geometryPath;

export function equationIssues(draft: EquationDraft): FormIssue[] {
  return [
    numberIssue({ path: `${g}.cells`, label: 'Unknowns', text: draft.cells, minimum: 8, maximum: 512, unit: '', works: '200', whole: true }),
    numberIssue({ path: `${g}.points`, label: 'Data points', text: draft.points, minimum: 8, maximum: 512, unit: '', works: '200', whole: true }),
    draft.equation === 'gravity' ? numberIssue({ path: `${g}.depth`, label: 'Depth', text: draft.depth, minimum: 0.05, maximum: 2, unit: '', works: '0.25' }) : null,
    draft.equation === 'inverse-heat' ? numberIssue({ path: `${g}.diffusivity`, label: 'Stiffness', text: draft.diffusivity, minimum: 0.5, maximum: 5, unit: '', works: '1' }) : null,
  ].filter((issue) => issue !== null);
}

export function equationGeometry(draft: EquationDraft): unknown {
  return {
    equation: draft.equation, cells: parseDecimal(draft.cells), points: parseDecimal(draft.points),
    ...(draft.equation === 'gravity' ? { depth: parseDecimal(draft.depth) } : {}),
    ...(draft.equation === 'inverse-heat' ? { diffusivity: parseDecimal(draft.diffusivity) } : {}),
  };
}

export type EquationSetting = Pick<IntegralEquationGeometry, 'equation' | 'depth' | 'diffusivity'>;
/** The equation with its number where it has one that can be read, else with the usual one. */
export function equationSetting({ equation, depth, diffusivity }: EquationDraft): EquationSetting {
  const number = parseDecimal(equation === 'gravity' ? depth : diffusivity);
  if (equation === 'gravity' && number >= 0.05 && number <= 2) return { equation, depth: number };
  if (equation === 'inverse-heat' && number >= 0.5 && number <= 5) return { equation, diffusivity: number };
  return { equation };
}
/** The interval of the unknown. */
export function equationInterval(setting: EquationSetting): [from: number, to: number] {
  const { from, to } = equationOf(setting);
  return [from, to];
}
