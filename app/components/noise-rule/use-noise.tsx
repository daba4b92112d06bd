import { createContext, useCallback, useContext, useEffect, useMemo, useRef, useState, type ReactNode } from 'react';
import { useSearchParams } from 'react-router-dom';

export const defaultNoise = 0.01;

/** The address's noise (a fraction): a number in (0, 1], else the default of 1 %. */
export function parseNoise(text: string | null): number {
  const value = text === null || text.trim() === '' ? NaN : Number(text);
  return Number.isFinite(value) && value > 0 && value <= 1 ? value : defaultNoise;
}

/** Four significant digits are finer than the rule can be read. */
export const noiseParam = (noise: number): string => String(Number(noise.toPrecision(4)));

interface NoiseState {
  noise: number;
  setNoise: (noise: number) => void;
}
const NoiseContext = createContext<NoiseState | null>(null);

/** Browsers limit how often the address may change; a drag is written once it rests this long. */
const writeDelayMs = 150;

/**
 * The rule's noise lives in the address (`?noise=0.01`). While the cursor moves the value is held here so that every
 * figure follows at once.
 */
export function NoiseProvider({ children }: { children: ReactNode }) {
  const [params, setParams] = useSearchParams();
  const fromAddress = parseNoise(params.get('noise'));
  const [held, setHeld] = useState<{ noise: number; over: number } | null>(null);
  const timer = useRef(0);
  useEffect(() => () => window.clearTimeout(timer.current), []);
  // A held value ends when the address has moved on from what it was laid over.
  const noise = held && held.over === fromAddress ? held.noise : fromAddress;
  const setNoise = useCallback(
    (next: number) => {
      setHeld({ noise: next, over: fromAddress });
      window.clearTimeout(timer.current);
      timer.current = window.setTimeout(() => {
        setParams(
          (old) => {
            const copy = new URLSearchParams(old);
            copy.set('noise', noiseParam(next));
            return copy;
          },
          { replace: true, preventScrollReset: true },
        );
      }, writeDelayMs);
    },
    [fromAddress, setParams],
  );
  const value = useMemo(() => ({ noise, setNoise }), [noise, setNoise]);
  return <NoiseContext.Provider value={value}>{children}</NoiseContext.Provider>;
}

/** Relative noise (fraction) at the rule's cursor, and its setter. */
export function useNoise(): NoiseState {
  const state = useContext(NoiseContext);
  if (!state) throw new Error('useNoise needs a NoiseProvider above it.');
  return state;
}

/** A search parameter with a fallback, written without a new history entry. */
export function useParam(key: string, fallback = ''): [string, (value: string | null) => void] {
  const [params, setParams] = useSearchParams();
  const set = useCallback(
    (value: string | null) =>
      setParams(
        (old) => {
          const copy = new URLSearchParams(old);
          if (value === null || value === '' || value === fallback) copy.delete(key);
          else copy.set(key, value);
          return copy;
        },
        { replace: true, preventScrollReset: true },
      ),
    [key, fallback, setParams],
  );
  return [params.get(key) ?? fallback, set];
}
