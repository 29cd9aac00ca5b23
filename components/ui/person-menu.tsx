"use client";

import { useRouter } from "next/navigation";
import { Menu, MenuChoice, MenuItem, MenuRule } from "./menu";
import { chooseTheme, THEMES, useTheme } from "./theme";

export type Person = { name: string; role: string };
export function PersonMenu({ person, onSignOut }: { person: Person; onSignOut?: () => void }) {
  const router = useRouter();
  const theme = useTheme();
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
