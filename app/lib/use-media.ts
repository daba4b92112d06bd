import { useSyncExternalStore } from 'react';

/** Whether a media query matches; false where there is no window to ask. */
export function useMedia(query: string): boolean {
  return useSyncExternalStore(
    (listener) => {
      if (typeof window.matchMedia !== 'function') return () => undefined;
      const media = window.matchMedia(query);
      media.addEventListener('change', listener);
      return () => media.removeEventListener('change', listener);
    },
    () => typeof window.matchMedia === 'function' && window.matchMedia(query).matches,
    () => false,
  );
}

export const usePhone = (): boolean => useMedia('(max-width: 700px)');
export const useNarrow = (): boolean => useMedia('(max-width: 900px)');
