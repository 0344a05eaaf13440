// Paper, sun or dark: the only thing kept in localStorage.

import type { App } from "./app";
import type { Theme } from "./state";

const KEY = "beadwright-theme";

export function storedTheme(): Theme {
  try {
    const kept = localStorage.getItem(KEY);
    return kept === "sun" || kept === "dark" ? kept : "paper";
  } catch {
    return "paper";
  }
}

export function applyTheme(theme: Theme): void {
  document.documentElement.dataset["theme"] = theme;
}

export function setTheme(app: App, theme: Theme): void {
  applyTheme(theme);
  app.update({ theme });
  try {
    localStorage.setItem(KEY, theme);
  } catch {
    // A browser that keeps nothing still shows it.
  }
}
