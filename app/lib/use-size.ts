import { useCallback, useState } from 'react';

/**
 * Width of an element in CSS px, followed as it changes. Where layout is not measured (tests), `fallback` stays.
 * The ref callback returns its own cleanup.
 */
export function useWidth(fallback = 640): [(node: HTMLElement | null) => (() => void) | undefined, number] {
  const [width, setWidth] = useState(fallback);
  const ref = useCallback((node: HTMLElement | null) => {
    if (!node) return undefined;
    const measure = () => {
      if (node.clientWidth > 0) setWidth(node.clientWidth);
    };
    measure();
    if (typeof ResizeObserver === 'undefined') return undefined;
    const observer = new ResizeObserver(measure);
    observer.observe(node);
    return () => observer.disconnect();
  }, []);
  return [ref, width];
}
