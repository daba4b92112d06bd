import { useState, type ReactNode } from 'react';
import { Button } from '../../../components/ui/button';
import { Dialog } from '../../../components/ui/dialog';
import { Dock, PageHead } from '../../../components/ui/layout';
import { ErrorPanel } from '../../../components/ui/notices';
import { StateShape } from '../../../components/ui/state-mark';
import { plural } from '../../../lib/format';
import { usePhone } from '../../../lib/use-media';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import { useSavePhantom, type SaveTarget } from '../api/change-phantom';
import { fieldId } from '../model/field-id';
import type { FormIssue } from '../model/form-issue';
import { stepOf, type FormMode } from '../model/form-request';
import { changeFamily, forgetForm, type PhantomForm } from '../model/phantom-form';
import { CopyFrom } from './copy-from';
import { FamilyChoice } from './family-choice';
import { FramesSection } from './frames-section';
import { GeometrySection } from './geometry-section';
import { LivePanel, useSettled } from './live-panel';
import { TermsSection } from './terms-section';
import { TruthSection } from './truth-section';
import { usePhantomEditor } from './use-phantom-editor';

export interface PhantomEditorProps {
  readonly mode: FormMode;
  /** The phantom that is edited or continued. */
  readonly phantom: PhantomDetail | null;
  readonly storageKey: string;
  readonly initial: PhantomForm;
  readonly groups: readonly { slug: string; name: string }[];
  readonly handle: string;
  readonly noise: number;
  readonly now: Date;
  /** Puts the content under a rule that shows the floor of what is simulated. */
  readonly frame: (floor: number | null, content: ReactNode) => ReactNode;
  /** After the draft is stored and where it was submitted. */
  readonly onStored: (detail: PhantomDetail, submitted: boolean) => void;
}

const steps = ['problem family', 'ground truth', 'geometry', 'measured frames', 'description and terms', 'simulated data and checks'] as const;

function targetOf(mode: FormMode, phantom: PhantomDetail | null, group: string): SaveTarget {
  if (mode === 'edit' && phantom) return { mode, slug: phantom.slug, n: phantom.version.n };
  if (mode === 'next' && phantom) return { mode, slug: phantom.slug };
  return { mode: 'new', group };
}

export function PhantomEditor(props: PhantomEditorProps) {
  const { mode, phantom, storageKey, groups, handle, noise, now, frame, onStored } = props;
  const [step, setStep] = useState(props.mode === 'new' ? 1 : 2);
  const [copying, setCopying] = useState(false);
  const phone = usePhone();
  const editor = usePhantomEditor({ storageKey, initial: props.initial, mode, now, maySimulate: true });
  const { form, change, issueAt, issues, live } = editor;
  const settled = useSettled(live.checks);
  // A draft that was stored before its submission was refused is edited from then on.
  const [stored, setStored] = useState<PhantomDetail | null>(null);
  const save = useSavePhantom(setStored);
  const part = { form, change, issueAt };

  const failing = live.checks?.filter((c) => c.state === 'fail') ?? [];
  const checksPass = live.checks !== null && settled >= live.checks.length && failing.length === 0;
  const send = (submit: boolean) => {
    editor.attempt();
    if (!editor.terms) {
      focusIssue(issues[0], phone, setStep);
      return;
    }
    save.mutate(
      { target: stored ? { mode: 'edit', slug: stored.slug, n: stored.version.n } : targetOf(mode, phantom, form.group), terms: editor.terms, whatChanged: form.whatChanged.trim(), submit },
      { onSuccess: (detail) => { forgetForm(storageKey); onStored(detail, submit); }, onError: editor.refuse },
    );
  };
  const title = mode === 'new' ? 'New phantom' : mode === 'edit' ? `Edit ${phantom?.name ?? 'the draft'}, version ${phantom?.version.n ?? ''}` : `New version of ${phantom?.name ?? 'the phantom'}`;
  const groupName = groups.find((g) => g.slug === form.group)?.name;
  const ready = issues.length === 0 && checksPass && !save.isPending;
  const reasons = <Reasons issues={issues} live={live.blocked === null} failing={failing.map((c) => c.name)} waiting={!checksPass && failing.length === 0 && issues.length === 0} onGo={(issue) => { editor.attempt(); focusIssue(issue, phone, setStep); }} />;
  const at = (n: number) => ({ 'data-st': n, className: step === n ? 'stp-on' : undefined });
  return frame(
    live.simulation?.modelErrorFloor ?? phantom?.version.modelErrorFloor ?? null,
    <>
      <PageHead crumbs={<><span>{editor.restored ? 'Unsent input kept in this browser' : mode === 'edit' ? 'Draft' : 'Nothing saved yet'}</span><span>{handle}{groupName ? `, ${groupName}` : ''}</span></>} title={title}>
        <span className="only-d headacts">
          {mode === 'new' ? <Button onClick={() => setCopying(true)}>Copy from a phantom</Button> : null}
          <Button onClick={() => send(false)} disabled={save.isPending}>Keep as draft</Button>
        </span>
      </PageHead>
      <div className="only-m">
        <div className="stepline"><span><b>Step {step} of 6</b>, {steps[step - 1]}</span></div>
        <div className="stepbar" aria-hidden="true">{steps.map((name, i) => <i key={name} className={i + 1 < step ? 'd' : i + 1 === step ? 'c' : undefined} />)}</div>
      </div>
      {save.isError ? <div style={{ marginBottom: 14 }}><ErrorPanel error={save.error} what={stored ? 'The draft is stored, but' : 'Not saved'} /></div> : null}
      <div className="pn-cols">
        <form onSubmit={(e) => e.preventDefault()} onBlur={(e) => editor.touch(e.target.id)} onChange={(e) => editor.touch((e.target as HTMLElement).id)}>
          <div {...at(1)}><section style={{ paddingBottom: 26 }}><FamilyChoice value={form.family} fixed={mode !== 'new'} onChange={(family) => change((old) => changeFamily(old, family))} /></section></div>
          <div {...at(2)}><TruthSection {...part} truth={editor.truth} /></div>
          <div {...at(3)}><GeometrySection {...part} /></div>
          <div {...at(4)}><FramesSection {...part} /></div>
          <div {...at(5)}><TermsSection {...part} mode={mode} groups={groups} now={now} /></div>
        </form>
        <aside aria-label="Live simulation" data-st={6} className={step === 6 ? 'live sheet stp-on' : 'live sheet'}>
          <LivePanel family={form.family} live={live} noise={noise} settled={settled} />
          <div className="sendbox only-d">
            <Button look="primary" big disabled={!ready} onClick={() => send(true)}>{save.isPending ? 'Submitting' : 'Submit for review'}</Button>
            {reasons}
          </div>
          <div className="only-m">{reasons}</div>
        </aside>
      </div>
      <Dock>
        <Button disabled={step === 1} onClick={() => { setStep(step - 1); window.scrollTo(0, 0); }}>Back</Button>
        <div className="sm" style={{ flex: 1 }}>
          <b style={{ color: 'var(--ink)' }}>{live.checks ? (settled < live.checks.length ? `${settled} of ${live.checks.length} checks settled` : failing.length ? plural(failing.length, 'check fails', 'checks fail') : 'All checks pass') : 'Checks wait'}</b><br />
          {issues.length ? <span style={{ color: 'var(--brick)' }}>{plural(issues.length, 'field')} to correct</span> : <button type="button" className="lnk" onClick={() => send(false)}>Keep as draft</button>}
        </div>
        {step < 6 ? <Button look="primary" onClick={() => { setStep(step + 1); window.scrollTo(0, 0); }}>Next</Button> : <Button look="primary" disabled={!ready} onClick={() => send(true)}>Submit</Button>}
      </Dock>
      <Dialog open={copying} onClose={() => setCopying(false)} title="Copy from a phantom" actions={<Button onClick={() => setCopying(false)}>Keep this form</Button>}>
        <CopyFrom onCopy={(copy) => { editor.setForm({ ...copy, group: form.group, sealed: false, sealedUntil: '', frames: null, framesOrigin: 'none', whatChanged: '' }); setCopying(false); }} />
      </Dialog>
    </>,
  );
}

/** Opens the step of a fault on phones and puts the focus on its field. */
function focusIssue(issue: FormIssue | undefined, phone: boolean, setStep: (step: number) => void): void {
  if (!issue) return;
  if (phone) setStep(stepOf(issue.path));
  window.setTimeout(() => {
    const field = document.getElementById(fieldId(issue.path)) ?? document.getElementById(['', 'truth', 'truth', 'geometry', 'frames', 'terms'][stepOf(issue.path)] ?? 'terms');
    field?.scrollIntoView({ block: 'center' });
    field?.focus();
  }, 0);
}

/** Why the submission is disabled, each reason leading to its field. */
function Reasons({ issues, live, failing, waiting, onGo }: { issues: readonly FormIssue[]; live: boolean; failing: readonly string[]; waiting: boolean; onGo: (issue: FormIssue) => void }) {
  const lines = issues.slice(0, 5);
  return (
    <ul className="reasons">
      {lines.map((issue) => (
        <li key={`${issue.path}${issue.message}`}>
          <StateShape state="fail" />
          <span>{issue.label}: <a href={`#${fieldId(issue.path)}`} onClick={(e) => { e.preventDefault(); onGo(issue); }}>{issue.message}</a></span>
        </li>
      ))}
      {issues.length > lines.length ? <li>and {plural(issues.length - lines.length, 'other field')}</li> : null}
      {failing.map((name) => <li key={name}><StateShape state="fail" /><span>{name}: the check fails. Change the geometry or the truth.</span></li>)}
      {waiting ? <li className="calm">{live ? 'Submitting opens when the checks have settled.' : 'Submitting opens after the simulation.'}</li> : null}
    </ul>
  );
}
