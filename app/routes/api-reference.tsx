import '../styles/pages/reference.css';
import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { ButtonAnchor } from '../components/ui/button';
import { PageHead, Section } from '../components/ui/layout';
import { ErrorPanel, Loading } from '../components/ui/notices';
import { openApiQueryOptions } from '../features/reference/api/openapi';
import { OperationEntry } from '../features/reference/components/operation-entry';
import { apiUrl } from '../lib/api-client';
import { plural } from '../lib/format';
import { paths } from '../lib/paths';

export default function ApiReference() {
  const openApi = useQuery(openApiQueryOptions());
  const document = openApi.data;
  const operations = Object.entries(document?.paths ?? {}).flatMap(([path, methods]) => Object.entries(methods).map(([method, operation]) => ({ path, method, operation })));
  return (
    <Page title="API" className="page-api">
      <PageHead
        crumbs={<><Link to={paths.reference()}>Reference</Link><span>API</span></>}
        title="Everything on these pages, for scripts"
        lead={document?.info.description ?? 'Reading what is published needs no account.'}
      >
        <ButtonAnchor href={apiUrl('/openapi.json')} download="hadamark-openapi.json">OpenAPI 3.1 document</ButtonAnchor>
        <Link className="btn" to={paths.account()}>Tokens</Link>
      </PageHead>
      {openApi.isPending ? <Loading label="Reading the interface's description" /> : null}
      {openApi.isError ? <ErrorPanel error={openApi.error} what="The API's reference" onRetry={() => void openApi.refetch()} /> : null}
      {document ? (
        <>
          <div className="sheet pad api-start">
            <p>Base address <code className="mono">{window.location.origin}{document.servers[0]?.url}</code>. Send a token as</p>
            <pre className="mono" tabIndex={0}>{`curl -H "Authorization: Bearer $TOKEN" ${window.location.origin}/api/v1/session`}</pre>
            <p className="sm">{document.components.securitySchemes.token?.description}</p>
          </div>
          {document.tags.map((tag) => {
            const own = operations.filter(({ operation }) => operation.tags.includes(tag.name));
            return (
              <Section key={tag.name} title={tag.name.charAt(0).toUpperCase() + tag.name.slice(1)} note={plural(own.length, 'address', 'addresses')} id={`tag-${tag.name}`}>
                <div className="sheet">{own.map((entry) => <OperationEntry key={entry.operation.operationId} document={document} {...entry} />)}</div>
              </Section>
            );
          })}
        </>
      ) : null}
    </Page>
  );
}
