import { useSyncExternalStore } from "react";

export const themeChoices = ["system", "light", "dark"] as const;
export type ThemeChoice = (typeof themeChoices)[number];

/** The key public/theme.js reads before the first paint. */
const storageKey = "shelftide-theme";
const listeners = new Set<() => void>();

export const readThemeChoice = (): ThemeChoice => {
  const chosen = document.documentElement.dataset.theme;
  return chosen === "light" || chosen === "dark" ? chosen : "system";
};

/** Applies a person's choice at once and keeps it for the next visit; "system" forgets it. */
export const chooseTheme = (choice: ThemeChoice): void => {
  const root = document.documentElement;
  if (choice === "system") delete root.dataset.theme;
  else root.dataset.theme = choice;
  try {
    if (choice === "system") localStorage.removeItem(storageKey);
    else localStorage.setItem(storageKey, choice);
  } catch {
    // Storage can be closed to us: the choice then lasts until the page is left.
  }
  listeners.forEach((listener) => listener());
};

const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

export const useThemeChoice = (): ThemeChoice => useSyncExternalStore(subscribe, readThemeChoice);
