import '../styles/pages/phantom.css';
import { useParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { useNoise } from '../components/noise-rule/use-noise';
import { ButtonAnchor, ButtonLink } from '../components/ui/button';
import { Dock, PageHead, Section } from '../components/ui/layout';
import { Markdown } from '../components/ui/markdown';
import { BelowFloor, Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { StateMark } from '../components/ui/state-mark';
import { usePhantom, usePhantomSimulation } from '../features/phantoms/api/get-phantom';
import { BestHere } from '../features/phantoms/components/best-here';
import { Citation, Downloads } from '../features/phantoms/components/citation-and-files';
import { PhantomChecks, PhantomNotices, PhantomReview, WithdrawPhantom } from '../features/phantoms/components/phantom-actions';
import { PhantomTop } from '../features/phantoms/components/phantom-top';
import { PhantomVersions } from '../features/phantoms/components/phantom-versions';
import { SealedCompanion } from '../features/phantoms/components/sealed-companion';
import { SimulatedData } from '../features/phantoms/components/simulated-data';
import { isApiError } from '../lib/api-client';
import { formatPercent } from '../lib/format';
import { useSettled } from '../lib/use-settled';
import { paths } from '../lib/paths';
import type { PhantomDetail } from '../../shared/contracts/phantoms';
import { familyNames } from '../../shared/domain/families';

export default function PhantomRoute() {
  const { slug = '', n } = useParams();
  const number = n === undefined ? undefined : Number(n);
  const phantom = usePhantom(slug, number);
  if (phantom.isPending) return <Page title="Phantom" rule={{}} className="page-phantom"><PageHead title="Phantom" /><Loading label="Fetching the phantom" disc /></Page>;
  if (phantom.isError) {
    const missing = isApiError(phantom.error) && phantom.error.status === 404;
    return (
      <Page title="Phantom" className="page-phantom">
        <PageHead title={missing ? 'No such phantom' : 'Phantom'} />
        {missing ? <Empty title={`Nothing is registered as ${slug}${number ? `, version ${number}` : ''}`}>It may be a draft of a group you are not in. <ButtonLink to={paths.phantoms()} style={{ marginTop: 8 }}>All phantoms</ButtonLink></Empty> : <ErrorPanel error={phantom.error} onRetry={() => void phantom.refetch()} />}
      </Page>
    );
  }
  return <PhantomPage key={`${slug}-${phantom.data.version.n}`} detail={phantom.data} />;
}

function PhantomPage({ detail }: { detail: PhantomDetail }) {
  const { noise } = useNoise();
  const settled = useSettled(noise);
  const { version } = detail;
  const simulation = usePhantomSimulation(detail.slug, version.n);
  const floor = version.modelErrorFloor;
  const run = `${paths.solverNew()}?phantom=${detail.slug}`;
  const published = version.state === 'published';
  return (
    <Page title={`${detail.id} ${version.name}`} rule={{ floor }} className="page-phantom">
      <PageHead
        crumbs={<><span>Phantom <span className="mono">{detail.id}</span>, version {version.n}</span><span>{familyNames[detail.family].line}</span><span>Curated by {version.createdBy.handle}, {detail.group.name}</span>{published ? null : <StateMark state={version.state} />}</>}
        title={version.name}
      >
        {detail.may.newVersion ? <ButtonLink to={`${paths.phantomNew()}?from=${detail.slug}`}>New version</ButtonLink> : null}
        <WithdrawPhantom detail={detail} />
        <span className="only-d acts">
          <ButtonAnchor href="#cite">Cite</ButtonAnchor>
          <ButtonAnchor href="#download">Download</ButtonAnchor>
          {published ? <ButtonLink look="primary" to={run}>Run a solver on it</ButtonLink> : null}
        </span>
      </PageHead>
      <PhantomNotices detail={detail} />
      <PhantomTop detail={detail} simulation={simulation.data} />
      {floor !== null && noise < floor ? <div style={{ marginTop: 16 }}><BelowFloor noise={noise} floor={floor} /></div> : null}
      {simulation.data ? <SimulatedData family={detail.family} simulation={simulation.data} noise={noise} /> : (
        <Section title={`Simulated data at ${formatPercent(noise)} noise`}>{simulation.isError ? <ErrorPanel error={simulation.error} onRetry={() => void simulation.refetch()} /> : <Loading label="Fetching the simulated data" />}</Section>
      )}
      <PhantomReview detail={detail} />
      <div className="sec ph-two">
        <section>
          <PhantomVersions detail={detail} />
          <SealedCompanion detail={detail} />
          <BestHere slug={detail.slug} version={version.n} noise={settled} floor={floor} />
          <PhantomChecks detail={detail} />
        </section>
        <section>
          {version.description.trim() ? <><div className="sh"><h2>Description</h2></div><div className="sheet pad desc"><Markdown source={version.description} /></div></> : null}
          <Citation detail={detail} />
          <Downloads detail={detail} simulation={simulation.data} />
          {version.frames ? <><div className="sh gap-top"><h2>Measured frames</h2></div><div className="sheet pad sm">{version.frames.frames} frames of {version.frames.valuesPerFrame} values, measured {version.frames.origin === 'tank' ? 'on a tank, plant or sample' : 'on people or animals'}{version.frames.instrument ? `: ${version.frames.instrument}` : ''}.</div></> : null}
        </section>
      </div>
      <Dock>
        <ButtonAnchor href="#cite">Cite</ButtonAnchor>
        <ButtonAnchor href="#download">Download</ButtonAnchor>
        {published ? <ButtonLink look="primary" to={run} style={{ flex: 1 }}>Run a solver on it</ButtonLink> : null}
      </Dock>
    </Page>
  );
}
