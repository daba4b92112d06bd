import { Field, Select } from '../../../components/ui/field';
import { FormSection } from '../../../components/ui/layout';
import { Markdown } from '../../../components/ui/markdown';
import { licences } from '../../../../shared/contracts/common';
import { fieldId } from '../model/field-id';
import { sealRange, type FormMode } from '../model/form-request';
import { licenceNames } from '../model/licences';
import type { FormPart } from './form-part';

interface Props extends FormPart {
  mode: FormMode;
  groups: readonly { slug: string; name: string }[];
  now: Date;
}

export function TermsSection({ form, change, issueAt, mode, groups, now }: Props) {
  const range = sealRange(now);
  return (
    <FormSection title="Description and terms" fact="plain text marks and formulas" id="terms">
      {mode === 'next' || mode === 'edit' ? (
        <Field id={fieldId('whatChanged')} className="gap" label="What changed" maxLength={300} value={form.whatChanged} error={issueAt('whatChanged')} help="One line, shown in the list of versions." onChange={(e) => change({ whatChanged: e.target.value })} />
      ) : null}
      <div className={groups.length > 1 && mode === 'new' ? 'g2 gap' : 'gap'}>
        <Field id={fieldId('name')} label="Name" maxLength={80} value={form.name} error={issueAt('name')} placeholder="Three bodies, one resistive" onChange={(e) => change({ name: e.target.value })} />
        {groups.length > 1 && mode === 'new' ? (
          <Select id={fieldId('group')} label="Owned by" value={form.group} error={issueAt('group')} onChange={(e) => change({ group: e.target.value })}>
            <option value="">Choose one</option>
            {groups.map((g) => <option key={g.slug} value={g.slug}>{g.name}</option>)}
          </Select>
        ) : null}
      </div>
      <div className="fld gap">
        <label htmlFor={fieldId('description')}>Description</label>
        <div className="mdedit">
          <textarea className="t" id={fieldId('description')} rows={6} maxLength={20_000} value={form.description} aria-describedby={fieldId('description-help')} onChange={(e) => change({ description: e.target.value })} />
          <div aria-label="Preview of the description" role="region" tabIndex={0}>
            {form.description.trim() ? <Markdown source={form.description} className="pv" /> : <p className="sm">The preview appears here.</p>}
          </div>
        </div>
        <span className="help" id={fieldId('description-help')}>Markdown, with formulas between dollar signs: $\sigma = 0.38$.{issueAt('description') ? ` ${issueAt('description')}` : ''}</span>
      </div>
      <div className="g3">
        <Select id={fieldId('licence')} label="Licence" value={form.licence} error={issueAt('licence')} help="Covers truth, geometry and frames." onChange={(e) => change({ licence: licences.find((l) => l === e.target.value) ?? '' })}>
          <option value="">Choose one</option>
          {licences.map((l) => <option key={l} value={l}>{licenceNames[l].name}</option>)}
        </Select>
        <Select label="Ground truth" value={form.sealed ? 'sealed' : 'open'} help={form.sealed ? 'Its hash is public from the first day.' : 'Published together with the phantom.'} onChange={(e) => change(e.target.value === 'sealed' ? { sealed: true, sealedUntil: form.sealedUntil || range.earliest } : { sealed: false })}>
          <option value="open">Open from the start</option>
          <option value="sealed">Sealed until a date</option>
        </Select>
        {form.sealed ? (
          <Field id={fieldId('sealedUntil')} label="Opens on" type="date" min={range.earliest} max={range.latest} value={form.sealedUntil} error={issueAt('sealedUntil')} help={`From ${range.earliest} to ${range.latest}.`} onChange={(e) => change({ sealedUntil: e.target.value })} />
        ) : null}
      </div>
    </FormSection>
  );
}
