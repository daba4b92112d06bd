import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { tokenCreateSchema, tokenLifeDays } from '../../../../shared/contracts/token';
import { tokenScopeNames, tokenScopes, type TokenScope } from '../../../../shared/domain/token-scopes';
import { Button } from '../../../components/ui/button';
import { Checkbox, Field, Select } from '../../../components/ui/field';
import { Tag } from '../../../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { useToast } from '../../../components/ui/toast';
import { isApiError } from '../../../lib/api-client';
import { formatDate, formatDateTime } from '../../../lib/format';
import { listTokensQueryOptions, useCreateToken, useRevokeToken } from '../api/account';

export function Tokens() {
  const tokens = useQuery(listTokensQueryOptions());
  const revoke = useRevokeToken();
  const create = useCreateToken();
  const toast = useToast();
  const fresh = create.data;
  return (
    <>
      {fresh ? (
        <div className="nw" role="status">
          <b>{fresh.name} was created. Copy it now.</b>
          <code>{fresh.token}</code>
          <p>It is not shown again. Whoever holds it acts as you within what it may.</p>
          <Button onClick={() => void navigator.clipboard.writeText(fresh.token).then(() => toast('Token copied.'))}>Copy</Button>
        </div>
      ) : null}
      {tokens.isPending ? <Loading label="Reading tokens" /> : null}
      {tokens.isError ? <ErrorPanel error={tokens.error} what="Tokens" onRetry={() => void tokens.refetch()} /> : null}
      {tokens.data?.length === 0 ? <Empty title="No token">Create one below for a script.</Empty> : null}
      {tokens.data?.length ? (
        <div className="sheet">
          <table className="tk">
            <caption className="vh">Your tokens</caption>
            <thead><tr><th scope="col">Name</th><th scope="col">May</th><th scope="col" className="num">Last used</th><th scope="col" className="num">Expires</th><th scope="col"><span className="vh">Revoke</span></th></tr></thead>
            <tbody>
              {tokens.data.map((token) => (
                <tr key={token.id}>
                  <td><b>{token.name}</b> <span className="mono sm">{token.prefix}…</span></td>
                  <td><span className="sc">{token.scopes.map((scope) => <Tag key={scope}>{scope}</Tag>)}</span></td>
                  <td className="num" data-h="last used ">{token.lastUsedAt ? formatDateTime(token.lastUsedAt) : 'never'}</td>
                  <td className={token.expired ? 'num text-amber' : 'num'} data-h="expires ">{formatDate(token.expiresAt)}{token.expired ? ', over' : ''}</td>
                  <td className="num"><button type="button" className="lk d" disabled={revoke.isPending} aria-label={`Revoke ${token.name}`} onClick={() => revoke.mutate(token.id, { onSuccess: () => toast(`${token.name} was revoked.`) })}>Revoke</button></td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      ) : null}
      <NewToken create={create} />
    </>
  );
}

function NewToken({ create }: { create: ReturnType<typeof useCreateToken> }) {
  const [name, setName] = useState('');
  const [days, setDays] = useState<(typeof tokenLifeDays)[number]>(90);
  const [scopes, setScopes] = useState<TokenScope[]>(['read']);
  const parsed = tokenCreateSchema.safeParse({ name, scopes, expiresInDays: days });
  return (
    <form className="g2 new-token" onSubmit={(event) => { event.preventDefault(); if (parsed.success) create.mutate(parsed.data, { onSuccess: () => setName('') }); }}>
      <Field label="Name of a new token" value={name} maxLength={60} placeholder="What will use it" onChange={(event) => setName(event.target.value)} error={isApiError(create.error) ? (create.error.issueAt('name') ?? create.error.message) : undefined} />
      <Select label="Expires after" value={days} onChange={(event) => setDays(tokenLifeDays.find((d) => d === Number(event.target.value)) ?? 90)}>
        {tokenLifeDays.map((d) => <option key={d} value={d}>{d === 365 ? '1 year' : `${d} days`}</option>)}
      </Select>
      <fieldset className="bare wide">
        <legend className="lab">It may</legend>
        <div className="scopes">
          {tokenScopes.map((scope) => <Checkbox key={scope} checked={scopes.includes(scope)} onChange={(event) => setScopes(event.target.checked ? [...scopes, scope] : scopes.filter((s) => s !== scope))}><span className="mono">{scope}</span> {tokenScopeNames[scope]}</Checkbox>)}
        </div>
      </fieldset>
      <div className="wide flex gap-x3 items-center">
        <Button type="submit" disabled={!parsed.success || create.isPending}>Create token</Button>
        {parsed.success ? null : <span className="sm">{parsed.error.issues[0]?.message}</span>}
      </div>
    </form>
  );
}
