import '../styles/pages/reference.css';
import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { ButtonLink } from '../components/ui/button';
import { PageHead, Section } from '../components/ui/layout';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { catalogueQueryOptions } from '../features/reference/api/catalogue';
import { definitionsOf, kindNames, kinds } from '../features/reference/model/definitions';
import { plural } from '../lib/format';
import { paths } from '../lib/paths';

export default function Reference() {
  const catalogue = useQuery(catalogueQueryOptions());
  return (
    <Page title="Reference" className="page-reference">
      <PageHead title="What every number here means" lead="Each definition with its formula, unit, range, traps and published source, made from the same registries that compute.">
        <ButtonLink to={paths.verification()}>Verification</ButtonLink>
        <ButtonLink to={paths.apiReference()}>API</ButtonLink>
      </PageHead>
      {catalogue.isPending ? <Loading label="Reading the registries" /> : null}
      {catalogue.isError ? <ErrorPanel error={catalogue.error} what="The reference" onRetry={() => void catalogue.refetch()} /> : null}
      {catalogue.data ? kinds.map((kind) => {
        const items = definitionsOf(kind, catalogue.data);
        return (
          <Section key={kind} title={kindNames[kind].many} note={`${kindNames[kind].line}; ${plural(items.length, 'entry', 'entries')}`} id={kind}>
            <div className="sheet ref-list">
              {items.map((d) => (
                <div key={d.key}>
                  <b><Link className="strong" to={paths.referenceEntry(kind, d.key)}>{d.name}</Link></b>
                  <p>{d.summary}</p>
                  <span className="sm">{d.sources.map((source) => source.short).join(', ')}</span>
                </div>
              ))}
            </div>
          </Section>
        );
      }) : null}
    </Page>
  );
}
