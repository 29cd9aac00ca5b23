"use client";

import { useSyncExternalStore } from "react";

export type Theme = "system" | "light" | "dark";

export const THEMES = [
  { value: "system", label: "As the system" },
  { value: "light", label: "Light" },
  { value: "dark", label: "Dark" },
] as const;

const themeNow = (): Theme => (document.documentElement.dataset.theme as Theme | undefined) ?? "system";

const onThemeChange = (changed: () => void) => {
  const observer = new MutationObserver(changed);
  observer.observe(document.documentElement, { attributeFilter: ["data-theme"] });
  return () => observer.disconnect();
};

export const useTheme = (): Theme => useSyncExternalStore<Theme>(onThemeChange, themeNow, () => "system");

/** The cookie lets the server write the theme into the first page, so that nothing flashes. */
export function chooseTheme(theme: Theme) {
  if (theme === "system") delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
  document.cookie = `theme=${theme}; path=/; max-age=${theme === "system" ? 0 : 31_536_000}; samesite=lax`;
}
