import { StateShape } from '../../../components/ui/state-mark';
import type { Method, RuleKey } from '../../../../solvers/core/types';
import { parameterRules } from '../../../../solvers/parameter-choice/registry';
import { fieldId, ruleFields, rulePath, type SolverForm } from '../model/solver-form';

interface Props {
  readonly method: Method;
  readonly form: SolverForm;
  readonly change: (patch: Partial<SolverForm>) => void;
  readonly issueAt: (path: string) => string | undefined;
}

/** The rules the method accepts, each with its own settings in its row. */
export function RuleChoice({ method, form, change, issueAt }: Props) {
  const rules = method.capabilities.rules;
  if (rules.length === 0) return <p className="sm">This method has no parameter to choose.</p>;
  return (
    <fieldset className="sheet rule-l">
      <legend className="vh">Rule that chooses the parameter</legend>
      {rules.map((key) => <RuleRow key={key} rule={key} method={method} form={form} change={change} issueAt={issueAt} />)}
    </fieldset>
  );
}

function RuleRow({ rule, method, form, change, issueAt }: Props & { rule: RuleKey }) {
  const described = parameterRules.find((r) => r.key === rule);
  const on = form.rule === rule;
  const fields = ruleFields(method, rule);
  return (
    <div className={on ? 'opt on' : 'opt'}>
      <label className="pick">
        <input type="radio" name="rule" checked={on} onChange={() => change({ rule })} />
        <span>
          <b>{described?.name ?? rule}</b>
          <span>{described?.summary}</span>
        </span>
      </label>
      {fields.map((field) => {
        const key = `${rule}.${field.name}`;
        const fault = on ? issueAt(rulePath(field.name)) : undefined;
        const id = on ? fieldId(rulePath(field.name)) : `s-${rule}-${field.name}`;
        return (
          <div key={key} className={fault ? 'set fld err' : 'set'}>
            <label htmlFor={id}>{field.label.toLowerCase()}</label>
            <input className="t" id={id} inputMode="decimal" disabled={!on} value={form.ruleValues[key] ?? ''} aria-invalid={fault ? true : undefined} aria-describedby={fault ? `${id}-help` : undefined} onChange={(e) => change({ ruleValues: { ...form.ruleValues, [key]: e.target.value } })} />
            {fault ? <span className="help" id={`${id}-help`}><StateShape state="fail" />{fault}</span> : null}
          </div>
        );
      })}
    </div>
  );
}
