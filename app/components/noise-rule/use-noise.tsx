import { createContext, useCallback, useContext, useEffect, useRef, useState, type ReactNode } from 'react';
import { useSearchParams } from 'react-router-dom';

export const defaultNoise = 0.01;

/** The address's level: a number in (0, 10] (a noise is at most 1, a contrast 10), else the default of 1 %. */
export function parseNoise(text: string | null): number {
  const value = text === null || text.trim() === '' ? NaN : Number(text);
  return Number.isFinite(value) && value > 0 && value <= 10 ? value : defaultNoise;
}

/** Four significant digits are finer than the rule can be read. */
export const noiseParam = (noise: number): string => String(Number(noise.toPrecision(4)));

interface NoiseState {
  noise: number;
  setNoise: (noise: number) => void;
  /** Changes search parameters in place, without a history entry. */
  update: (change: (params: URLSearchParams) => void) => void;
}
const NoiseContext = createContext<NoiseState | null>(null);

/** A value ahead of the address, and the addresses it may be ahead of: the one it started from and those written since. */
interface Held {
  noise: number;
  over: readonly number[];
}
const rounded = (noise: number): number => Number(noiseParam(noise));

/** Browsers limit how often the address may change; a drag is written once it rests this long. */
const writeDelayMs = 150;

/**
 * The rule's noise lives in the address (`?noise=0.01`). While the cursor moves the value is held here so that every
 * figure follows at once.
 */
export function NoiseProvider({ children }: { children: ReactNode }) {
  const [params, setParams] = useSearchParams();
  const fromAddress = parseNoise(params.get('noise'));
  const [held, setHeld] = useState<Held | null>(null);
  const timer = useRef(0);
  useEffect(() => () => window.clearTimeout(timer.current), []);
  // The address on screen lags behind what was asked for (navigation is a transition), so changes are made to the newest
  // one: two quick changes would otherwise write over each other.
  // Addresses asked for and not on screen yet: an earlier one that comes on screen late must not take back a later change.
  const newest = useRef<{ params: URLSearchParams; write: typeof setParams; asked: string[] }>({ params, write: setParams, asked: [] });
  useEffect(() => {
    const { current } = newest;
    current.write = setParams;
    const at = current.asked.indexOf(params.toString());
    current.asked = at < 0 ? [] : current.asked.slice(at + 1);
    if (current.asked.length === 0) current.params = params;
  }, [params, setParams]);
  const update = useCallback((change: (params: URLSearchParams) => void) => {
    const next = new URLSearchParams(newest.current.params);
    change(next);
    newest.current.params = next;
    newest.current.asked.push(next.toString());
    newest.current.write(next, { replace: true, preventScrollReset: true });
  }, []);
  // A held value ends when the address has caught up with it, or moved to a value that did not come from here.
  if (held && (fromAddress === rounded(held.noise) || !held.over.includes(fromAddress))) setHeld(null);
  const noise = held?.noise ?? fromAddress;
  const setNoise = (next: number) => {
    setHeld((old) => ({ noise: next, over: old?.over ?? [fromAddress] }));
    window.clearTimeout(timer.current);
    timer.current = window.setTimeout(() => {
      setHeld((old) => old && { ...old, over: [...old.over, rounded(next)] });
      update((copy) => copy.set('noise', noiseParam(next)));
    }, writeDelayMs);
  };
  const value = { noise, setNoise, update };
  return <NoiseContext.Provider value={value}>{children}</NoiseContext.Provider>;
}

function useNoiseContext(): NoiseState {
  const state = useContext(NoiseContext);
  if (!state) throw new Error('The noise and the search parameters need a NoiseProvider above them.');
  return state;
}

/** Relative noise (fraction) at the rule's cursor, and its setter. */
export function useNoise(): Pick<NoiseState, 'noise' | 'setNoise'> {
  return useNoiseContext();
}

/** A search parameter with a fallback, written without a new history entry. */
export function useParam(key: string, fallback = ''): [string, (value: string | null) => void] {
  const [params] = useSearchParams();
  const { update } = useNoiseContext();
  const set = useCallback(
    (value: string | null) =>
      update((copy) => {
        if (value === null || value === '' || value === fallback) copy.delete(key);
        else copy.set(key, value);
      }),
    [key, fallback, update],
  );
  return [params.get(key) ?? fallback, set];
}
