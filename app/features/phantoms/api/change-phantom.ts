import { useMutation, useQueryClient } from '@tanstack/react-query';
import { phantomDetailSchema, type PhantomCreate, type PhantomDetail } from '../../../../shared/contracts/phantoms';
import { api } from '../../../lib/api-client';
import { versionPath } from './get-phantom';
import { phantomKeys } from './keys';

const e = encodeURIComponent;
type Terms = Omit<PhantomCreate, 'group'>;

export const createPhantom = (json: PhantomCreate): Promise<PhantomDetail> => api.post('/phantoms', phantomDetailSchema, { json });
export const updatePhantomVersion = (slug: string, n: number, json: Terms & { whatChanged: string }): Promise<PhantomDetail> => api.put(versionPath(slug, n), phantomDetailSchema, { json });
export const createPhantomVersion = (slug: string, json: Terms & { whatChanged: string }): Promise<PhantomDetail> => api.post(`/phantoms/${e(slug)}/versions`, phantomDetailSchema, { json });
export const submitPhantomVersion = (slug: string, n: number): Promise<PhantomDetail> => api.post(`${versionPath(slug, n)}/submit`, phantomDetailSchema);

/** Where the form's content goes: a new phantom, a stored draft, or the next version of a phantom. */
export type SaveTarget = { readonly mode: 'new'; readonly group: string } | { readonly mode: 'edit'; readonly slug: string; readonly n: number } | { readonly mode: 'next'; readonly slug: string };
export interface SaveInput {
  readonly target: SaveTarget;
  readonly terms: Terms;
  readonly whatChanged: string;
  /** Also hand it to the reviewers. */
  readonly submit: boolean;
}

async function save({ target, terms, whatChanged }: SaveInput): Promise<PhantomDetail> {
  if (target.mode === 'new') return createPhantom({ group: target.group, ...terms });
  if (target.mode === 'edit') return updatePhantomVersion(target.slug, target.n, { ...terms, whatChanged });
  return createPhantomVersion(target.slug, { ...terms, whatChanged });
}

/** `saved` is called once the draft is stored, before the submission, so that a refused submission edits that draft. */
export function useSavePhantom(saved: (detail: PhantomDetail) => void) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: async (input: SaveInput) => {
      const stored = await save(input);
      saved(stored);
      return input.submit ? submitPhantomVersion(stored.slug, stored.version.n) : stored;
    },
    onSettled: () => client.invalidateQueries({ queryKey: phantomKeys.all }),
  });
}

function usePhantomChange<V>(send: (values: V) => Promise<PhantomDetail>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: send,
    onSuccess: () => Promise.all([client.invalidateQueries({ queryKey: phantomKeys.all }), client.invalidateQueries({ queryKey: ['review'] })]),
  });
}
export const useSubmitPhantom = (slug: string, n: number) => usePhantomChange<void>(() => submitPhantomVersion(slug, n));
export const useWithdrawPhantom = (slug: string, n: number) => usePhantomChange<{ reason: string }>((json) => api.post(`${versionPath(slug, n)}/withdraw`, phantomDetailSchema, { json }));
export const usePhantomVerdict = (slug: string, n: number) =>
  usePhantomChange<{ verdict: 'publish' | 'request-changes'; reason: string }>((json) => api.post(`${versionPath(slug, n)}/verdict`, phantomDetailSchema, { json }));
