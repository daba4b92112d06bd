import { useCallback, useEffect, useMemo, useState } from 'react';
import { isApiError } from '../../../lib/api-client';
import { useSettled } from '../../../lib/use-settled';
import type { Configuration } from '../../../../shared/contracts/solvers';
import { fieldId, findMethod, labelOf, methodDefaults, readSolverForm, storedSolverForm, storeSolverForm, type FormIssue, type SolverForm, type SolverMode } from '../model/solver-form';

const restMs = 250;

/** State of the solver form: input, faults by field, the configuration that has rested. */
export function useSolverEditor(storageKey: string, initial: SolverForm, mode: SolverMode) {
  const [form, setForm] = useState<SolverForm>(() => storedSolverForm(storageKey) ?? initial);
  const [touched, setTouched] = useState<ReadonlySet<string>>(new Set());
  const [attempted, setAttempted] = useState(false);
  const [refusal, setRefusal] = useState<{ error: unknown; form: SolverForm } | null>(null);
  useEffect(() => storeSolverForm(storageKey, form), [storageKey, form]);

  const change = useCallback((patch: Partial<SolverForm>) => setForm((old) => ({ ...old, ...patch })), []);
  const chooseMethod = useCallback((key: string) => {
    const method = findMethod(key);
    if (method) change(methodDefaults(method));
  }, [change]);
  const touch = useCallback((id: string) => {
    if (id) setTouched((old) => (old.has(id) ? old : new Set(old).add(id)));
  }, []);

  const read = useMemo(() => readSolverForm(form, mode), [form, mode]);
  const serverIssues = useMemo<FormIssue[]>(() => {
    // What the server found holds until the input changes.
    if (!refusal || !isApiError(refusal.error) || refusal.form !== form) return [];
    return refusal.error.issues.map((issue) => ({ path: issue.path.join('.'), label: labelOf(issue.path.join('.'), form), message: issue.message }));
  }, [refusal, form]);
  const issueAt = useCallback(
    (path: string): string | undefined =>
      serverIssues.find((i) => i.path === path)?.message ?? (attempted || touched.has(fieldId(path)) ? read.issues.find((i) => i.path === path)?.message : undefined),
    [serverIssues, read.issues, attempted, touched],
  );

  const text = read.configuration ? JSON.stringify(read.configuration) : null;
  const [lastText, setLastText] = useState(text);
  if (text !== null && text !== lastText) setLastText(text);
  const restedText = useSettled(lastText, restMs);
  const rested = useMemo(() => (restedText ? (JSON.parse(restedText) as Configuration) : null), [restedText]);
  return {
    form, change, chooseMethod, touch, issueAt, configuration: read.configuration,
    /** The last complete configuration, once it has rested: what the preview shows. */
    rested, stale: text === null || text !== restedText,
    issues: [...read.issues, ...serverIssues.filter((s) => !read.issues.some((i) => i.path === s.path))],
    attempt: () => setAttempted(true), refuse: (error: unknown) => setRefusal({ error, form }),
  };
}
