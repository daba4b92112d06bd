import { useSyncExternalStore } from 'react';

export const themeChoices = ['system', 'light', 'dark'] as const;
export type ThemeChoice = (typeof themeChoices)[number];
export type Theme = 'light' | 'dark';

const key = 'hadamark-theme';
const listeners = new Set<() => void>();

function systemDark(): boolean {
  return typeof window.matchMedia === 'function' && window.matchMedia('(prefers-color-scheme: dark)').matches;
}

export function storedChoice(): ThemeChoice {
  try {
    const value = window.localStorage.getItem(key);
    return themeChoices.find((c) => c === value) ?? 'system';
  } catch {
    // Storage can be switched off; the system's choice then holds.
    return 'system';
  }
}

export function resolvedTheme(): Theme {
  const choice = storedChoice();
  if (choice !== 'system') return choice;
  return systemDark() ? 'dark' : 'light';
}

/** Puts the theme on the root element. Called before the first render so that no light flash is seen. */
export function applyTheme(): void {
  document.documentElement.dataset.theme = resolvedTheme();
  for (const listener of listeners) listener();
}

export function setThemeChoice(choice: ThemeChoice): void {
  try {
    if (choice === 'system') window.localStorage.removeItem(key);
    else window.localStorage.setItem(key, choice);
  } catch {
    document.documentElement.dataset.theme = choice === 'system' ? resolvedTheme() : choice;
  }
  applyTheme();
}

/** Follows the system where it decides. Paper always gets the light sheet. */
export function watchSystemTheme(): void {
  window.addEventListener('beforeprint', () => {
    document.documentElement.dataset.theme = 'light';
  });
  window.addEventListener('afterprint', applyTheme);
  if (typeof window.matchMedia === 'function') window.matchMedia('(prefers-color-scheme: dark)').addEventListener('change', applyTheme);
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** The theme on screen; components that draw on a canvas repaint when it changes. */
export function useTheme(): Theme {
  return useSyncExternalStore(subscribe, resolvedTheme);
}
export function useThemeChoice(): ThemeChoice {
  return useSyncExternalStore(subscribe, storedChoice);
}
