import { useEffect, useState } from 'react';

/** `value` once it has rested for `delayMs`: what is asked of the server while a cursor moves. */
export function useSettled<T>(value: T, delayMs = 120): T {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = window.setTimeout(() => setSettled(value), delayMs);
    return () => window.clearTimeout(timer);
  }, [value, delayMs]);
  return settled;
}
