import { useState, type FormEvent } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { Button } from '../components/ui/button';
import { ErrorSummary, Field, Option, Select, Textarea } from '../components/ui/field';
import { FormSection, PageHead } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { useCreateBench } from '../features/benches/api/create-bench';
import { axisWords, type AxisKey } from '../../shared/domain/axes';
import { axesFor, emptyBenchForm, noiseModelsFor, offeredLevels, parseLadder, toBenchRequest, type BenchForm } from '../features/benches/model/bench-form';
import { metricViews } from '../features/benches/model/metric-view';
import { usePhantoms } from '../features/phantoms/api/list-phantoms';
import { useSession } from '../features/session/api/session';
import { isApiError } from '../lib/api-client';
import { formatCount, plural } from '../lib/format';
import { paths } from '../lib/paths';

const fieldNames: Readonly<Record<string, string>> = {
  group: 'group', title: 'short name', question: 'question', phantoms: 'phantoms', noiseModel: 'kind of noise', axis: 'what varies', axisNoise: 'noise', ladder: 'levels', draws: 'draws', seed: 'seed', description: 'description', rankingMetric: 'ranking metric',
};

export default function BenchNew() {
  const session = useSession();
  const groups = (session.account?.groups ?? []).filter((g) => session.can('bench.create', { groupId: g.id }));
  const head = <PageHead crumbs={<><Link to={paths.benches()}>Benches</Link><span>New bench</span></>} title="Ask a question that every solver answers alike" lead="What a bench asks never changes once it is open. Until then it is a draft that only your group reads." />;
  if (session.isPending) return <Page title="New bench">{head}<Loading label="Fetching your groups" /></Page>;
  if (groups.length === 0) {
    return (
      <Page title="New bench">
        {head}
        <Empty title={session.account ? 'No group of yours may make a bench' : 'Sign in first'}>
          {session.account ? <>Curators and owners of a group make benches. <Link to={paths.groups()}>Your groups</Link></> : <Link to={paths.signIn(paths.benchNew())}>Sign in</Link>}
        </Empty>
      </Page>
    );
  }
  return <Page title="New bench" className="page-bench-new">{head}<NewBenchForm groups={groups} /></Page>;
}

function NewBenchForm({ groups }: { groups: readonly { slug: string; name: string }[] }) {
  // A seed nobody chose by its results: the day the form was opened.
  const [form, setForm] = useState<BenchForm>(() => emptyBenchForm(groups[0]?.slug ?? '', Number(new Date().toISOString().slice(0, 10).replaceAll('-', ''))));
  const [errors, setErrors] = useState<ReadonlyMap<string, string>>(new Map());
  const phantoms = usePhantoms({ state: 'published' });
  const create = useCreateBench();
  const navigate = useNavigate();
  const families = [...new Set((phantoms.data?.items ?? []).filter((p) => form.phantoms.includes(`${p.slug}@${p.current.n}`)).map((p) => p.family))];
  const served = axesFor(families);
  const axis = axisWords[form.axis];
  const noises = noiseModelsFor(families);
  const noise = noises.find((model) => model.key === form.noiseModel);
  const set = (part: Partial<BenchForm>) => setForm({ ...form, ...part });
  const submit = (e: FormEvent) => {
    e.preventDefault();
    const { request, errors: found } = toBenchRequest(form);
    setErrors(found ?? new Map());
    if (request) create.mutate(request, { onSuccess: (bench) => void navigate(paths.bench(bench.slug)) });
  };
  const server = create.error;
  const at = (field: string): string | undefined => errors.get(field) ?? (field === 'noiseModel' && !noise ? 'This noise does not occur in the family of the chosen phantoms.' : undefined) ?? (form.axis !== 'noise' && field === 'axis' && !served.includes(form.axis) ? `${axis.name} does not serve the chosen phantoms.` : undefined) ?? (isApiError(server) ? server.issues.find((i) => (i.path[0] === 'axis' && i.path[1] === 'noise' ? 'axisNoise' : i.path[0]) === field)?.message : undefined);
  const faulty = Object.keys(fieldNames).filter((f) => at(f) !== undefined);
  const levels = parseLadder(form.ladder, form.axis).filter((v) => Number.isFinite(v)).length;
  const each = form.phantoms.length * levels * (Number(form.draws) || 0);
  return (
    <form onSubmit={submit} noValidate style={{ maxWidth: 880 }}>
      {faulty.length ? <ErrorSummary title={`${plural(faulty.length, 'field')} to correct`} fields={faulty.map((f) => ({ id: `bench-${f}`, name: fieldNames[f] ?? f }))} /> : null}
      {server && faulty.length === 0 ? <ErrorPanel error={server} what="The bench" /> : null}
      <FormSection title="The question" fact="shown on every page of the bench">
        <div className="grid gap-x4">
          <Select id="bench-group" label="Group" value={form.group} error={at('group')} onChange={(e) => set({ group: e.target.value })}>{groups.map((g) => <option key={g.slug} value={g.slug}>{g.name}</option>)}</Select>
          <Field id="bench-title" label="Short name" value={form.title} error={at('title')} help="What and with which geometry, as in Buried inclusions, 16 electrodes." onChange={(e) => set({ title: e.target.value })} />
          <Field id="bench-question" label="Question" value={form.question} error={at('question')} help="A sentence that the ranking answers." onChange={(e) => set({ question: e.target.value })} />
          <Textarea id="bench-description" label="Description" value={form.description} error={at('description')} help="Markdown with formulas, optional." onChange={(e) => set({ description: e.target.value })} />
        </div>
      </FormSection>
      <FormSection title="Phantoms" fact={plural(form.phantoms.length, 'phantom')}>
        {phantoms.isPending ? <Loading label="Fetching the phantoms" /> : phantoms.isError ? <ErrorPanel error={phantoms.error} what="The phantoms" /> : phantoms.data.items.length === 0 ? (
          <Empty title="No phantom is published yet">A bench needs at least one. <Link to={paths.phantomNew()}>New phantom</Link></Empty>
        ) : (
          <fieldset className="sheet" id="bench-phantoms" tabIndex={-1} aria-describedby={at('phantoms') ? 'bench-phantoms-help' : undefined}>
            <legend className="vh">Phantom versions</legend>
            {phantoms.data.items.map((p) => {
              const key = `${p.slug}@${p.current.n}`;
              return (
                <Option key={key} type="checkbox" title={`${p.name}, version ${p.current.n}`} checked={form.phantoms.includes(key)} onChange={(e) => set({ phantoms: e.target.checked ? [...form.phantoms, key] : form.phantoms.filter((k) => k !== key) })}>
                  {p.id}, {p.line}{p.current.sealed ? ', sealed' : ''}, {p.group.name}
                </Option>
              );
            })}
          </fieldset>
        )}
        {at('phantoms') ? <div className="fld err"><span className="help" id="bench-phantoms-help">{at('phantoms')}</span></div> : null}
      </FormSection>
      <FormSection title={form.axis === 'noise' ? 'Noise and draws' : 'Levels and draws'} fact={each > 0 ? `${formatCount(each)} reconstructions for each solver` : undefined}>
        <div className="grid gap-x4">
          <Select id="bench-axis" label="What varies" value={form.axis} error={at('axis')} help={axis.line} onChange={(e) => { const key = e.target.value as AxisKey; set({ axis: key, ladder: offeredLevels(key) }); }}>
            {[...served, ...(served.includes(form.axis) ? [] : [form.axis])].map((key) => <option key={key} value={key}>{axisWords[key].name}</option>)}
          </Select>
          <Select id="bench-noiseModel" label="Kind of noise" value={form.noiseModel} error={at('noiseModel')} help={noise?.summary} onChange={(e) => set({ noiseModel: e.target.value })}>
            {noises.map((model) => <option key={model.key} value={model.key}>{model.name}</option>)}
            {noise ? null : <option value={form.noiseModel}>{form.noiseModel}</option>}
          </Select>
          {form.axis === 'noise' ? null : <Field id="bench-axisNoise" label="Noise" unit="%" inputMode="decimal" value={form.axisNoise} error={at('axisNoise')} help="Relative level, the same at every level of the axis." onChange={(e) => set({ axisNoise: e.target.value })} />}
          <Field id="bench-ladder" label={form.axis === 'noise' ? 'Noise levels' : `Levels of ${axis.name.toLowerCase()}`} unit={axis.print === 'share' ? '%' : 'none'} value={form.ladder} error={at('ladder')} help={form.axis === 'noise' ? 'Relative L2 levels, increasing. The same for every solver.' : 'Increasing. The same for every solver.'} onChange={(e) => set({ ladder: e.target.value })} />
          <div className="grid grid-cols-2 gap-x4">
            <Field id="bench-draws" label="Draws per level" unit="draws" inputMode="numeric" value={form.draws} error={at('draws')} onChange={(e) => set({ draws: e.target.value })} />
            <Field id="bench-seed" label="Seed" unit="none" inputMode="numeric" value={form.seed} error={at('seed')} help="All solvers see the same draws." onChange={(e) => set({ seed: e.target.value })} />
          </div>
          <Select id="bench-rankingMetric" label="Ranking metric" value={form.rankingMetric} error={at('rankingMetric')} help="The others are shown beside it." onChange={(e) => set({ rankingMetric: e.target.value })}>
            {metricViews.filter((m) => m.ranked).map((m) => <option key={m.key} value={m.key}>{m.name}</option>)}
          </Select>
        </div>
      </FormSection>
      <div className="flex gap-x2 items-center flex-wrap">
        <Button type="submit" look="primary" disabled={create.isPending}>Save draft</Button>
        <span className="sm">Open it from its page once your group has looked at it.</span>
      </div>
    </form>
  );
}
