import { useMemo, useState, type ReactNode } from 'react';
import { BodyImage } from '../../../components/images/body-image';
import { Button } from '../../../components/ui/button';
import { Checkbox, Field, Select } from '../../../components/ui/field';
import { Formula } from '../../../components/ui/formula';
import { Dock, PageHead } from '../../../components/ui/layout';
import { ErrorPanel, Loading } from '../../../components/ui/notices';
import { StateShape } from '../../../components/ui/state-mark';
import { formatError, formatPercent, plural } from '../../../lib/format';
import { usePhone } from '../../../lib/use-media';
import { useSettled } from '../../../lib/use-settled';
import { defaultLadder } from '../../../../shared/domain/ladder';
import type { SolverDetail } from '../../../../shared/contracts/solvers';
import { methods } from '../../../../solvers/methods/registry';
import { familyNames } from '../../../../shared/domain/families';
import { useBenchChoice, useCost, useOpenBenches, useOthers } from '../api/bench-data';
import { useSubmitSolver, type Submitted } from '../api/change-solver';
import { capabilityWords, classesOf, methodClassNames } from '../model/method-classes';
import { fieldId, findMethod, forgetSolverForm, parameterPath, stepOf, type FormIssue, type SolverForm, type SolverMode } from '../model/solver-form';
import { ParameterFields } from './parameter-fields';
import { CostRow, PreviewPanel, usePreviewPictures } from './preview-panel';
import { RuleChoice } from './rule-choice';
import { PreviewOn } from './preview-on';
import { useFit } from './use-fit';
import { usePreview } from './use-preview';
import { usePreviewTarget } from './use-preview-target';
import { useSolverEditor } from './use-solver-editor';

export interface SolverEditorProps {
  readonly mode: SolverMode;
  readonly solver: SolverDetail | null;
  readonly storageKey: string;
  readonly initial: SolverForm;
  readonly groups: readonly { slug: string; name: string }[];
  readonly handle: string;
  readonly noise: number;
  /** Puts the content under a rule that shows this floor and these levels. */
  readonly frame: (rule: { floor: number | null; levels: readonly number[] }, content: ReactNode) => ReactNode;
  readonly onDone: (result: Submitted, registered: boolean) => void;
}

const steps = ['bench and name', 'method', 'parameters', 'choice of the parameter', 'declaration', 'preview and submit'] as const;

export function SolverEditor({ mode, solver, storageKey, initial, groups, handle, noise, frame, onDone }: SolverEditorProps) {
  const [step, setStep] = useState(1);
  const phone = usePhone();
  const editor = useSolverEditor(storageKey, initial, mode);
  const { form, change, issueAt, issues } = editor;
  const method = findMethod(form.method) ?? methods[0]!;

  const benches = useOpenBenches();
  const bench = useBenchChoice(form.bench);
  const { families } = method.capabilities;
  const open = useMemo(() => (form.bench ? (bench.data?.phantoms ?? []).filter((p) => !p.sealed) : null), [form.bench, bench.data]);
  const on = usePreviewTarget(open, families);
  const { target, phantom } = on;
  const cost = useCost(form.bench, form.method);
  const series = useOthers(form.bench, target?.slug ?? '');
  const others = useMemo(() => (series.data?.items ?? []).map((item) => item.levels.map((l) => ({ level: l.level, error: l.median }))), [series.data]);
  const levels = bench.data?.ladder ?? defaultLadder;
  const settledNoise = useSettled(noise, 160);
  const fit = useFit(form.bench ? (bench.data?.family ?? null) : null, form.bench ? phantom : null);
  const unfit = fit.reasonOf(method);
  const fits = unfit === null;
  const preview = usePreview({ phantom: fits ? phantom : null, configuration: editor.rested, noise: settledNoise, levels, seed: bench.data?.seed ?? 1 });
  const { yours } = usePreviewPictures(phantom, preview.image.data?.image);
  const l2 = preview.image.data?.metrics['relative-l2-error'];

  const [stored, setStored] = useState<SolverDetail | null>(null);
  const submit = useSubmitSolver(setStored);
  const go = (path: string) => {
    editor.attempt();
    focusField(path, phone, setStep);
  };
  const send = (register: boolean) => {
    editor.attempt();
    const { configuration } = editor;
    if (issues.length || !configuration) {
      if (issues[0]) focusField(issues[0].path, phone, setStep);
      return;
    }
    submit.mutate(
      {
        target: mode === 'next' && solver ? { mode: 'next', slug: solver.slug, whatChanged: form.whatChanged.trim() } : { mode: 'new', group: form.group, name: form.name.trim(), description: form.description },
        configuration, declaration: { notTuned: form.notTuned, ownMesh: form.ownMesh, sourceMayBePublished: form.sourceMayBePublished },
        bench: form.bench || null, register, stored: stored && register ? stored : null,
      },
      { onSuccess: (result) => { forgetSolverForm(storageKey); onDone(result, register); }, onError: editor.refuse },
    );
  };
  const disabled = issues.length > 0 || !fits || submit.isPending;
  const groupName = groups.find((g) => g.slug === form.group)?.name ?? solver?.group.name;
  const at = (n: number) => ({ 'data-st': n, className: step === n ? 'stp-on' : undefined });
  const reason = !fits ? <span style={{ color: 'var(--brick)' }}>{unfit} Choose another method or bench.</span> : <Reason issues={issues} onGo={go} />;
  const firstMethodOf = (key: string) => (fit.offered.find((m) => m.class === key) ?? methods.find((m) => m.class === key))?.key ?? form.method;
  const offeredClasses = classesOf(fit.offered.includes(method) ? fit.offered : [...fit.offered, method]);
  const algorithms = methods.filter((m) => m.class === method.class && (m === method || fit.offered.includes(m)));

  return frame(
    { floor: phantom?.floor ?? (bench.data ? bench.data.modelErrorFloor : null), levels },
    <>
      <PageHead crumbs={<><span>{handle}{groupName ? `, ${groupName}` : ''}</span>{mode === 'next' && solver ? <span>next version of <span className="mono">{solver.id}</span></span> : null}</>} title={mode === 'next' && solver ? `New version of ${solver.name}` : 'Submit a solver configuration'}>
        <span className="only-d"><Button disabled={submit.isPending} onClick={() => send(false)}>Keep as draft</Button></span>
      </PageHead>
      <div className="only-m">
        <div className="stepline"><span><b>Step {step} of 6</b>, {steps[step - 1]}</span>{issues.length ? <span style={{ color: 'var(--brick)' }}>{plural(issues.length, 'field')} to correct</span> : null}</div>
        <div className="stepbar" aria-hidden="true">{steps.map((name, i) => <i key={name} className={issues.some((issue) => stepOf(issue.path) === i + 1) && i + 1 < step ? 'e' : i + 1 < step ? 'd' : i + 1 === step ? 'c' : undefined} />)}</div>
      </div>
      {submit.isError ? <div style={{ marginBottom: 14 }}><ErrorPanel error={submit.error} what={stored ? 'Registered, but not entered' : 'Not submitted'} /></div> : null}
      <div className="sn-cols">
        <form className="sn-form" onSubmit={(e) => e.preventDefault()} onBlur={(e) => editor.touch(e.target.id)} onChange={(e) => editor.touch((e.target as HTMLElement).id)}>
          <section {...at(1)}>
            <div><h2>Bench</h2><p>The configuration runs unchanged on every phantom of it.</p></div>
            <div className="g2">
              <Select id={fieldId('bench')} label="Runs on" value={form.bench} help={bench.data ? `${familyNames[bench.data.family].name}: ${plural(bench.data.phantomCount, 'phantom')}, ${bench.data.draws} draws at ${bench.data.ladder.length} levels.` : benches.isError ? 'Benches cannot be fetched; try again later.' : 'Or register it first and enter it later.'} onChange={(e) => change({ bench: e.target.value })}>
                <option value="">no bench yet</option>
                {(benches.data?.items ?? []).map((b) => <option key={b.slug} value={b.slug}>{b.id} {b.title}, {familyNames[b.family].name.toLowerCase().replace('x-ray', 'X-ray')}</option>)}
              </Select>
              {mode === 'new' ? (
                <Field id={fieldId('name')} label="Name in the table" maxLength={80} value={form.name} error={issueAt('name')} placeholder={`${method.name}, first try`} onChange={(e) => change({ name: e.target.value })} />
              ) : (
                <Field id={fieldId('whatChanged')} label="What changed" maxLength={300} value={form.whatChanged} error={issueAt('whatChanged')} help="One line, shown in the list of versions." onChange={(e) => change({ whatChanged: e.target.value })} />
              )}
              {mode === 'new' && groups.length > 1 ? (
                <Select id={fieldId('group')} label="Owned by" value={form.group} error={issueAt('group')} onChange={(e) => change({ group: e.target.value })}>
                  <option value="">Choose one</option>
                  {groups.map((g) => <option key={g.slug} value={g.slug}>{g.name}</option>)}
                </Select>
              ) : null}
            </div>
          </section>
          <section {...at(2)}>
            <div><h2>Method</h2><p>Decides which parameters and rules apply.</p></div>
            <div>
              <div className="fam" role="radiogroup" aria-label="Method family">
                {offeredClasses.map((key) => (
                  <label key={key}>
                    <input type="radio" name="class" checked={method.class === key} onChange={() => editor.chooseMethod(firstMethodOf(key))} />
                    <span><b>{methodClassNames[key].name}</b><span>{methodClassNames[key].line}</span></span>
                  </label>
                ))}
              </div>
              <div style={{ marginTop: 14 }}>
                <Select id={fieldId('configuration.method')} label="Algorithm" value={form.method} error={unfit ?? issueAt('configuration.method')} help={`${method.summary} (${capabilityWords(method)}; ${method.sources.map((s) => s.short).join('; ')})`} onChange={(e) => editor.chooseMethod(e.target.value)}>
                  {algorithms.map((m) => <option key={m.key} value={m.key}>{m.name}</option>)}
                </Select>
                {fit.refused.length ? (
                  <details className="helpmore">
                    <summary>{plural(fit.refused.length, 'method does', 'methods do')} not serve this bench</summary>
                    <ul className="refused">{fit.refused.map(({ method: m, reason: why }) => <li key={m.key} className="sm">{why}</li>)}</ul>
                  </details>
                ) : null}
                <div className="fline" tabIndex={0} role="region" aria-label="Formula of the method"><Formula tex={method.formula} label={`Formula of ${method.name}`} /></div>
              </div>
            </div>
          </section>
          <section {...at(3)}>
            <div><h2>Parameters</h2><p>Fixed across the noise ladder.</p></div>
            {method.fields.length ? (
              <div className="g2"><ParameterFields fields={method.fields} pathOf={parameterPath} valueOf={(name) => form.values[name] ?? ''} onChange={(name, value) => change({ values: { ...form.values, [name]: value } })} issueAt={issueAt} /></div>
            ) : <p className="sm">This method has no parameters.</p>}
          </section>
          <section {...at(4)}>
            <div><h2>Regularisation parameter</h2><p>How it is chosen at each noise level.</p></div>
            <div><RuleChoice method={method} form={form} change={change} issueAt={issueAt} /></div>
          </section>
          <section {...at(5)}>
            <div><h2>Declaration</h2><p>Shown on the certificate.</p></div>
            <div className="dec">
              <Checkbox checked={form.notTuned} onChange={(e) => change({ notTuned: e.target.checked })}>No parameter was tuned on the phantoms of this bench</Checkbox>
              <Checkbox checked={form.ownMesh} onChange={(e) => change({ ownMesh: e.target.checked })}>The forward model uses a discretisation of its own, not that of the data</Checkbox>
              <Checkbox checked={form.sourceMayBePublished} onChange={(e) => change({ sourceMayBePublished: e.target.checked })}>The source may be published with the run</Checkbox>
            </div>
          </section>
        </form>
        <aside aria-label="Live preview" data-st={6} className={step === 6 ? 'sn-pv sheet stp-on' : 'sn-pv sheet'}>
          <div className="sh"><h2 style={{ fontSize: 18 }}>Preview at {formatPercent(noise)}</h2><p>draw 1, runs in your browser</p></div>
          <PreviewOn id="preview" target={on} families={families} />
          {phantom && fits ? (
            <PreviewPanel phantom={phantom} preview={preview} noise={settledNoise} levels={levels} others={others} stale={editor.stale || noise !== settledNoise} />
          ) : (
            <div className="pad">
              {on.error ? <ErrorPanel error={on.error} onRetry={on.retry} /> : target && fits ? <Loading label="Fetching the phantom" disc /> : (
                <p className="sm">{unfit ?? (form.bench ? (bench.isPending ? 'Fetching the bench.' : 'Every phantom of this bench is sealed: there is no truth to compare with.') : on.family?.pending ? 'Fetching phantoms of this family.' : 'No phantom of this family is published yet. Choose a bench: the preview reconstructs one of its phantoms.')}</p>
              )}
            </div>
          )}
          {cost.data && form.bench ? <CostRow cost={cost.data} /> : null}
          <div className="sn-send">
            <Button look="primary" big disabled={disabled} onClick={() => send(true)}>{submit.isPending ? 'Submitting' : form.bench ? 'Submit for validation' : 'Register'}</Button>
            <span className="sm">{reason}</span>
          </div>
        </aside>
      </div>
      <Dock>
        <div className="mini">{phantom ? <BodyImage label="Live reconstruction" picture={yours} body={phantom.grid.body} low={phantom.range[0]} high={phantom.range[1]} /> : null}</div>
        <div className="sm" style={{ flex: 1 }}><b style={{ color: 'var(--ink)' }} className="tn">{l2 === undefined ? 'no preview' : `L2 ${formatError(l2)}`}</b><br />at {formatPercent(noise)}, live</div>
        <Button disabled={step === 1} onClick={() => { setStep(step - 1); window.scrollTo(0, 0); }}>Back</Button>
        {step < 6 ? <Button look="primary" onClick={() => { setStep(step + 1); window.scrollTo(0, 0); }}>Next</Button> : null}
      </Dock>
    </>,
  );
}

function focusField(path: string, phone: boolean, setStep: (step: number) => void): void {
  if (phone) setStep(stepOf(path));
  window.setTimeout(() => {
    const field = document.getElementById(fieldId(path));
    field?.scrollIntoView({ block: 'center' });
    field?.focus();
  }, 0);
}

/** Why submitting is disabled, leading to the fields. */
function Reason({ issues, onGo }: { issues: readonly FormIssue[]; onGo: (path: string) => void }) {
  if (issues.length === 0) return <>A registered version never changes.</>;
  return (
    <span className="why">
      <StateShape state="fail" />
      <span>
        {issues.length === 1 ? 'One field to correct: ' : `${issues.length} fields to correct: `}
        {issues.slice(0, 4).map((issue, i) => (
          <span key={issue.path}>{i ? ', ' : ''}<a href={`#${fieldId(issue.path)}`} title={issue.message} onClick={(e) => { e.preventDefault(); onGo(issue.path); }}>{issue.label.toLowerCase()}</a></span>
        ))}
      </span>
    </span>
  );
}
