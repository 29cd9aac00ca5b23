"use client";

import { useRouter } from "next/navigation";
import { useSyncExternalStore } from "react";
import { Menu, MenuChoice, MenuItem, MenuRule } from "./menu";

export type Person = { name: string; role: string };
type Theme = "system" | "light" | "dark";

const THEMES = [
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

/** The cookie lets the server write the theme into the first page, so that nothing flashes. */
function chooseTheme(theme: Theme) {
  if (theme === "system") delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
  document.cookie = `theme=${theme}; path=/; max-age=${theme === "system" ? 0 : 31_536_000}; samesite=lax`;
}

export function PersonMenu({ person, onSignOut }: { person: Person; onSignOut?: () => void }) {
  const router = useRouter();
  const theme = useSyncExternalStore<Theme>(onThemeChange, themeNow, () => "system");
  return (
    <Menu align="end" label={person.name} trigger={<button type="button" className="person">{person.name}, {person.role}</button>}>
      <MenuItem onSelect={() => router.push("/settings")}>Settings</MenuItem>
      <MenuRule />
      <MenuChoice label="Paper" value={theme} options={THEMES} onChoose={chooseTheme} />
      {onSignOut && (
        <>
          <MenuRule />
          <MenuItem onSelect={onSignOut}>Sign out</MenuItem>
        </>
      )}
    </Menu>
  );
}
