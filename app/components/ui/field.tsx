import clsx from 'clsx';
import { useId, type ComponentProps, type ReactNode } from 'react';
import { StateShape } from './state-mark';

interface FieldFrame {
  label: ReactNode;
  /** Shown in the field's end, a unit or 'none'. */
  unit?: ReactNode;
  help?: ReactNode;
  error?: string;
  className?: string;
}

interface FrameProps extends FieldFrame {
  id: string;
  children: ReactNode;
}
function Frame({ id, label, unit, help, error, className, children }: FrameProps) {
  return (
    <div className={clsx('fld', error && 'err', className)}>
      <label htmlFor={id}>{label}</label>
      {unit === undefined ? children : <div className="unit">{children}<span>{unit}</span></div>}
      {error ? (
        <span className="help" id={`${id}-help`}>
          <StateShape state="fail" />
          {error}
        </span>
      ) : help ? (
        <span className="help" id={`${id}-help`}>{help}</span>
      ) : null}
    </div>
  );
}

const describe = (id: string, error?: string, help?: ReactNode) => ({
  id,
  'aria-invalid': error ? true : undefined,
  'aria-describedby': error || help ? `${id}-help` : undefined,
});

/** A labelled input; every other prop goes to the input. */
export function Field({ label, unit, help, error, className, id, ...rest }: FieldFrame & ComponentProps<'input'>) {
  const own = useId();
  const key = id ?? own;
  return (
    <Frame id={key} label={label} unit={unit} help={help} error={error} className={className}>
      <input className="t" {...describe(key, error, help)} {...rest} />
    </Frame>
  );
}

export function Select({ label, unit, help, error, className, id, children, ...rest }: FieldFrame & ComponentProps<'select'>) {
  const own = useId();
  const key = id ?? own;
  return (
    <Frame id={key} label={label} unit={unit} help={help} error={error} className={className}>
      <select className="t" {...describe(key, error, help)} {...rest}>{children}</select>
    </Frame>
  );
}

export function Textarea({ label, unit, help, error, className, id, ...rest }: FieldFrame & ComponentProps<'textarea'>) {
  const own = useId();
  const key = id ?? own;
  return (
    <Frame id={key} label={label} unit={unit} help={help} error={error} className={className}>
      <textarea className="t" rows={5} {...describe(key, error, help)} {...rest} />
    </Frame>
  );
}

/** One row of a choice (`.opt`): radio or checkbox with a name and a line below it. */
export function Option({ title, children, type = 'radio', ...rest }: Omit<ComponentProps<'input'>, 'title'> & { title: ReactNode; children?: ReactNode }) {
  return (
    <label className="opt">
      <input type={type} {...rest} />
      <span>
        <b>{title}</b>
        {children ? <span>{children}</span> : null}
      </span>
    </label>
  );
}

/** A checkbox with its words, for boxes and lists. */
export function Checkbox({ children, error, ...rest }: ComponentProps<'input'> & { children: ReactNode; error?: string }) {
  const id = useId();
  return (
    <>
      <label>
        <input type="checkbox" aria-invalid={error ? true : undefined} aria-describedby={error ? id : undefined} {...rest} />
        <span>{children}</span>
      </label>
      {error ? <span className="fld err"><span className="help" id={id}><StateShape state="fail" />{error}</span></span> : null}
    </>
  );
}

/** Names the fields to correct and leads to each. `fields`: element id and name. */
export function ErrorSummary({ title, fields, children }: { title: string; fields?: readonly { id: string; name: string }[]; children?: ReactNode }) {
  return (
    <div className="box br" role="alert">
      <p className="box-title"><StateShape state="fail" size={15} />{title}</p>
      {children ? <div>{children}</div> : null}
      {fields?.length ? (
        <p>
          {fields.map((f, i) => (
            <span key={f.id}>{i ? ', ' : ''}<a href={`#${f.id}`} onClick={(e) => { e.preventDefault(); document.getElementById(f.id)?.focus(); }}>{f.name}</a></span>
          ))}
        </p>
      ) : null}
    </div>
  );
}
