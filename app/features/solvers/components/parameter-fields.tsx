import type { ReactNode } from 'react';
import { Field, Select } from '../../../components/ui/field';
import { Formula } from '../../../components/ui/formula';
import type { ParameterField } from '../../../../solvers/core/types';
import { allowedRange } from '../model/parameter-facts';
import { fieldId } from '../model/solver-form';

interface Props {
  readonly fields: readonly ParameterField[];
  /** Path of a field in the request. */
  readonly pathOf: (name: string) => string;
  readonly valueOf: (name: string) => string;
  readonly onChange: (name: string, value: string) => void;
  readonly issueAt: (path: string) => string | undefined;
}

const labelOf = (field: ParameterField): ReactNode => (
  <>{field.label}{field.symbol ? <span className="sym"><Formula tex={field.symbol} inline /></span> : null}</>
);

/** The form of a method, made from its own description: unit, range, default and help of every parameter. */
export function ParameterFields({ fields, pathOf, valueOf, onChange, issueAt }: Props) {
  return (
    <>
      {fields.map((field) => {
        const path = pathOf(field.name);
        const common = { id: fieldId(path), label: labelOf(field), error: issueAt(path), value: valueOf(field.name) };
        if (field.kind === 'choice') {
          return (
            <Select key={path} {...common} help={field.help} onChange={(e) => onChange(field.name, e.target.value)}>
              {field.choices?.map((c) => <option key={c.value} value={c.value}>{c.label}</option>)}
            </Select>
          );
        }
        if (field.kind === 'text') return <Field key={path} {...common} spellCheck={false} help={field.help} onChange={(e) => onChange(field.name, e.target.value)} />;
        return <Field key={path} {...common} unit={field.unit || undefined} inputMode="decimal" help={`${field.help} ${allowedRange(field)}`} onChange={(e) => onChange(field.name, e.target.value)} />;
      })}
    </>
  );
}
