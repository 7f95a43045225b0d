import { useSyncExternalStore } from 'react';

export type Theme = 'day' | 'night';
export type ThemeChoice = Theme | 'system';

const KEY = 'downreach-theme';
const darkPreference = () => window.matchMedia('(prefers-color-scheme: dark)');
const listeners = new Set<() => void>();

function readChoice(): ThemeChoice {
  try {
    const kept = localStorage.getItem(KEY);
    return kept === 'day' || kept === 'night' ? kept : 'system';
  } catch {
    return 'system';
  }
}

let choice: ThemeChoice = readChoice();

const themeOf = (wanted: ThemeChoice): Theme => (wanted === 'system' ? (darkPreference().matches ? 'night' : 'day') : wanted);

function apply(): void {
  document.documentElement.dataset.theme = themeOf(choice);
  listeners.forEach((listener) => listener());
}

export function setThemeChoice(next: ThemeChoice): void {
  choice = next;
  try {
    if (next === 'system') localStorage.removeItem(KEY);
    else localStorage.setItem(KEY, next);
  } catch {
    // A browser that keeps nothing still shows the theme until the page is left.
  }
  apply();
}

function subscribe(listener: () => void): () => void {
  const preference = darkPreference();
  listeners.add(listener);
  preference.addEventListener('change', apply);
  return () => {
    listeners.delete(listener);
    preference.removeEventListener('change', apply);
  };
}

/** The theme shown and the choice behind it. */
export function useTheme(): { theme: Theme; choice: ThemeChoice; setChoice: (next: ThemeChoice) => void } {
  const chosen = useSyncExternalStore(subscribe, () => choice);
  const theme = useSyncExternalStore(subscribe, () => themeOf(choice));
  return { theme, choice: chosen, setChoice: setThemeChoice };
}
