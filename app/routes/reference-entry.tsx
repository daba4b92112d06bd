import '../styles/pages/reference.css';
import { useQuery } from '@tanstack/react-query';
import { lazy, Suspense } from 'react';
import { Link, useParams } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { Button, ButtonLink } from '../components/ui/button';
import { PageHead, Section } from '../components/ui/layout';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { useToast } from '../components/ui/toast';
import { catalogueQueryOptions } from '../features/reference/api/catalogue';
import { DefinitionAside, DefinitionBody, DefinitionFields, DefinitionNotes } from '../features/reference/components/definition-body';
import { ReferenceIndex } from '../features/reference/components/reference-index';
import { asKind, definitionsOf, kindNames } from '../features/reference/model/definitions';
import { paths } from '../lib/paths';
import NotFound from './not-found';

const MetricTrial = lazy(async () => ({ default: (await import('../features/reference/components/metric-trial')).MetricTrial }));

export default function ReferenceEntry() {
  const params = useParams();
  const catalogue = useQuery(catalogueQueryOptions());
  const toast = useToast();
  const kind = asKind(params.kind);
  if (!kind) return <NotFound what="definition" />;
  if (catalogue.isPending) return <Page title="Reference"><PageHead title="Reference" /><Loading label="Reading the registries" /></Page>;
  if (catalogue.isError) return <Page title="Reference"><PageHead title="Reference" /><ErrorPanel error={catalogue.error} what="The reference" onRetry={() => void catalogue.refetch()} /></Page>;
  const definition = definitionsOf(kind, catalogue.data).find((d) => d.key === params.key);
  if (!definition) return <NotFound what="definition" />;
  const cite = () => void navigator.clipboard.writeText(`Hadamark reference, ${kindNames[kind].many.toLowerCase()}: ${definition.name} (${definition.key}). ${window.location.origin}${paths.referenceEntry(kind, definition.key)}`).then(() => toast('Citation copied.'));
  return (
    <Page title={`${definition.name}, reference`} className="page-reference">
      <PageHead crumbs={<><Link to={paths.reference()}>Reference</Link><span>{kindNames[kind].many}</span><span className="mono">{definition.key}</span></>} title={definition.name}>
        <ButtonLink to={paths.verification()}>Verification</ButtonLink>
        <Button onClick={cite}>Cite definition</Button>
      </PageHead>
      <div className="ref-cols">
        <div><ReferenceIndex catalogue={catalogue.data} current={definition} /></div>
        <div className="ref-main">
          <DefinitionBody definition={definition} />
          {kind === 'metrics' ? (
            <Section title="Try it" note="one target of 2 S/m in a disc of 300 mm; move and blur the reconstruction">
              <Suspense fallback={<Loading label="Drawing the figure" />}><MetricTrial metricKey={definition.key} key={definition.key} /></Suspense>
            </Section>
          ) : null}
          <DefinitionFields definition={definition} />
          <DefinitionNotes definition={definition} />
        </div>
        <DefinitionAside definition={definition} />
      </div>
    </Page>
  );
}
