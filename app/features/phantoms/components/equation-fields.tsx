import { Field, Select } from '../../../components/ui/field';
import { Formula } from '../../../components/ui/formula';
import { FactList } from '../../../components/ui/layout';
import { plainNumber } from '../../../lib/problem-words';
import { equationKeys } from '../../../../shared/domain/geometry/integral-equation';
import { equationOf } from '../../../../solvers/problems/integral-equation/equations';
import { fieldId } from '../model/field-id';
import type { EquationDraft } from '../model/form-drafts';
import { geometryPath } from '../model/form-issue';
import { equationSetting } from '../model/geometry/integral-equation';
import type { FormPart } from './form-part';

const g = geometryPath;

export function EquationFields({ form, change, issueAt }: FormPart) {
  const { equation: draft } = form;
  const set = (patch: Partial<EquationDraft>) => change((old) => ({ equation: { ...old.equation, ...patch } }));
  const field = (key: 'cells' | 'points' | 'depth' | 'diffusivity') => ({ id: fieldId(`${g}.${key}`), error: issueAt(`${g}.${key}`), value: draft[key], onChange: (e: { target: { value: string } }) => set({ [key]: e.target.value }) });
  const equation = equationOf(equationSetting(draft));
  return (
    <>
      <div className="span-all eqn">
        <Select id={fieldId(`${g}.equation`)} label="Equation" value={draft.equation} error={issueAt(`${g}.equation`)} help={`${equation.line.charAt(0).toUpperCase()}${equation.line.slice(1)}.`} onChange={(e) => set({ equation: equationKeys.find((k) => k === e.target.value) ?? 'phillips' })}>
          {equationKeys.map((key) => <option key={key} value={key}>{equationOf({ equation: key }).name}</option>)}
        </Select>
        <div className="fbox" tabIndex={0} role="region" aria-label="Formulas of the equation">
          <Formula tex="g(s) = \int K(s,t)\, f(t)\, \mathrm{d}t" />
          <Formula tex={equation.kernelFormula} />
        </div>
      </div>
      <Field {...field('cells')} label="Unknowns" inputMode="numeric" help={`Cells of the interval from ${plainNumber(equation.from)} to ${plainNumber(equation.to)}.`} />
      <Field {...field('points')} label="Data points" inputMode="numeric" help={`Of the right-hand side from ${plainNumber(equation.dataFrom)} to ${plainNumber(equation.dataTo)}.`} />
      {draft.equation === 'gravity' ? <Field {...field('depth')} label="Depth" inputMode="decimal" help="Of the masses, in the unit of the interval; deeper is harder." /> : null}
      {draft.equation === 'inverse-heat' ? <Field {...field('diffusivity')} label="Stiffness" inputMode="decimal" help="About 1 is severely, 5 mildly ill-posed." /> : null}
      <FactList className="span-all" facts={[['Simulated by', equation.data ? 'the closed form of the right-hand side where the published solution is the truth' : 'quadrature at least four times finer'], ['Source', equation.sources.map((s) => s.short).join('; ')]]} />
    </>
  );
}
