import { useCallback, useDeferredValue, useEffect, useMemo, useState } from 'react';
import { isApiError } from '../../../lib/api-client';
import { useLiveSimulation } from '../api/simulate';
import { fieldId } from '../model/field-id';
import type { FormIssue } from '../model/form-issue';
import { fieldPath, labelOf, readDefinition, readForm, type FormMode } from '../model/form-request';
import { storeForm, storedForm, type PhantomForm } from '../model/phantom-form';
import type { FormPatch } from './form-part';
import type { LiveState } from './live-panel';
import { useTruthPicture } from './use-truth-picture';

const debounceMs = 450;

/** A value that has rested for a while. */
function useRested<T>(value: T): T {
  const [rested, setRested] = useState(value);
  useEffect(() => {
    const timer = window.setTimeout(() => setRested(value), debounceMs);
    return () => window.clearTimeout(timer);
  }, [value]);
  return rested;
}

interface Options {
  /** Which form this is; unsent input is kept under it. */
  readonly storageKey: string;
  readonly initial: PhantomForm;
  readonly mode: FormMode;
  readonly now: Date;
  /** Whether the reader may ask for simulations. */
  readonly maySimulate: boolean;
}

/** State of the phantom form: input, faults by field, picture of the truth, live simulation. */
export function usePhantomEditor({ storageKey, initial, mode, now, maySimulate }: Options) {
  const [form, setForm] = useState<PhantomForm>(() => storedForm(storageKey) ?? initial);
  const [restored] = useState(() => storedForm(storageKey) !== null);
  const [touched, setTouched] = useState<ReadonlySet<string>>(new Set());
  const [attempted, setAttempted] = useState(false);
  const [refusal, setRefusal] = useState<{ error: unknown; form: PhantomForm } | null>(null);

  const change = useCallback((patch: FormPatch) => setForm((old) => ({ ...old, ...(typeof patch === 'function' ? patch(old) : patch) })), []);
  useEffect(() => storeForm(storageKey, form), [storageKey, form]);

  const truth = useTruthPicture(useDeferredValue(form));
  const expressionError = form.truthKind === 'expression' ? truth.error : null;
  const read = useMemo(() => readForm(form, mode, now, expressionError), [form, mode, now, expressionError]);
  const serverIssues = useMemo<FormIssue[]>(() => {
    // What the server found holds until the input changes.
    if (!refusal || !isApiError(refusal.error) || refusal.form !== form) return [];
    return refusal.error.issues.map((issue) => {
      const path = fieldPath(issue.path.join('.'));
      return { path, label: labelOf(path), message: issue.message };
    });
  }, [refusal, form]);

  const touch = useCallback((id: string) => {
    if (id) setTouched((old) => (old.has(id) ? old : new Set(old).add(id)));
  }, []);
  const issueAt = useCallback(
    (path: string): string | undefined => {
      const server = serverIssues.find((i) => i.path === path);
      if (server) return server.message;
      if (!attempted && !touched.has(fieldId(path))) return undefined;
      return read.issues.find((i) => i.path === path)?.message;
    },
    [serverIssues, read.issues, attempted, touched],
  );

  const { definition, issues } = useMemo(() => readDefinition(form, expressionError), [form, expressionError]);
  // Text compares by content: a change of the name alone asks for nothing.
  const definitionText = useMemo(() => (definition ? JSON.stringify(definition) : null), [definition]);
  const restedText = useRested(definitionText);
  const rested = useMemo(() => (restedText ? readRested(restedText, definitionText, definition) : null), [restedText, definitionText, definition]);
  const { data, checks } = useLiveSimulation(rested, form.family, maySimulate);
  const current = restedText === definitionText && rested?.family === form.family;
  const live: LiveState = {
    simulation: data.data ?? null,
    stale: !current || data.isPlaceholderData || data.isFetching,
    error: current && data.isError ? data.error : null,
    checks: current && checks.isSuccess && !checks.isPlaceholderData ? checks.data.checks : null,
    checksError: current && checks.isError ? checks.error : null,
    blocked: !maySimulate ? 'sign in to simulate' : issues[0] ? `waits for ${issues[0].label.toLowerCase()}` : null,
    retry: () => void (data.isError ? data.refetch() : checks.refetch()),
  };
  return { form, change, setForm, restored, touch, issueAt, truth, live, issues: [...read.issues, ...serverIssues.filter((s) => !read.issues.some((i) => i.path === s.path))], terms: read.terms, attempt: () => setAttempted(true), refuse: (error: unknown) => setRefusal({ error, form }) };
}

/** The rested definition: the present one when nothing has changed since, else the one that was written down. */
function readRested(text: string, presentText: string | null, present: ReturnType<typeof readDefinition>['definition']): ReturnType<typeof readDefinition>['definition'] {
  return text === presentText ? present : (JSON.parse(text) as ReturnType<typeof readDefinition>['definition']);
}
