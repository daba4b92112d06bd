import { useQuery } from '@tanstack/react-query';
import { useDeferredValue, useState } from 'react';
import { SearchBox } from '../../../components/layout/search-box';
import { searchQueryOptions } from '../api/search';

const kinds = { phantom: 'Phantom', solver: 'Solver', bench: 'Bench', run: 'Run', group: 'Group' } as const;

/** The masthead's search over everything published. */
export function SiteSearch({ id }: { id: string }) {
  const [text, setText] = useState('');
  const q = useDeferredValue(text.trim());
  const { data, isFetching, isError } = useQuery(searchQueryOptions(q));
  const items = (q.length >= 2 ? (data?.items ?? []) : []).map((item) => ({
    key: `${item.kind}-${item.id}`, kind: kinds[item.kind], name: item.name, line: item.line, path: item.path,
  }));
  const note = isError ? 'The search failed. Try again.' : items.length ? undefined : isFetching ? 'Searching' : `Nothing is named '${q}', and no identifier or hash begins so.`;
  return <SearchBox id={id} text={text} onText={setText} items={items} note={note} />;
}
