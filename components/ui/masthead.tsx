"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import type { ReactNode } from "react";
import { FindField, type FindFieldProps } from "./find-field";
import { LabClock } from "./lab-clock";
import { Menu, MenuItem, MenuLink } from "./menu";
import { PageKeys } from "./page-keys";
import { PersonMenu, type Person } from "./person-menu";
import { isAt, MORE_PLACES, PLACES, type Place } from "./places";
import { ReedMark } from "./reed-mark";

export type MastheadProps = {
  /** The time of the server, ISO; the clock goes on from it. */
  now: string;
  zone: string;
  person: Person;
  /** Alarms that nobody has. */
  alarms: number;
  more?: readonly Place[];
  /** Said over every page of a laboratory that is not real. */
  demo?: ReactNode;
  onFind?: FindFieldProps["onFind"];
  onSignOut?: () => void;
};

const count = (n: number) => `${n} ${n === 1 ? "alarm" : "alarms"} that nobody has`;

export function Masthead({ now, zone, person, alarms, more = MORE_PLACES, demo, onFind, onSignOut }: MastheadProps) {
  const path = usePathname();
  const under = more.find((place) => isAt(place, path));
  return (
    <>
      <a className="skip-link" href="#main">Skip to the page</a>
      <PageKeys places={[...PLACES, ...more]} />
      {demo && <aside className="demo-notice" aria-label="Demo">{demo}</aside>}
      <header className="page-row masthead">
        <Link className="wordmark" href="/"><ReedMark />Longreed</Link>
        <div className="bar">
          <nav aria-label="Main">
            {PLACES.map((place) => (
              <Link key={place.href} href={place.href} aria-current={isAt(place, path) ? "page" : undefined}>
                {place.label}
                {place.href === "/" && alarms > 0 && <sup className="alarm-count" aria-label={count(alarms)}>{alarms}</sup>}
              </Link>
            ))}
            <Menu
              label="More"
              trigger={
                <button type="button" aria-current={under ? "page" : undefined}>
                  More{under && <><span className="font-normal text-ink3">&ensp;/&ensp;</span>{under.label}</>}
                </button>
              }
            >
              {more.map((place) => <MenuLink key={place.href} place={place} current={place === under} />)}
            </Menu>
          </nav>
          <FindField onFind={onFind} />
          <LabClock now={now} zone={zone} />
          <PersonMenu person={person} onSignOut={onSignOut} />
        </div>
      </header>
      <PhoneBar path={path} alarms={alarms} more={more} onSignOut={onSignOut} />
    </>
  );
}

const PHONE_PLACES = [
  { label: "Today", href: "/", drawing: "M2 9c2-9 4-9 6 0s4 9 6 0 3-7 4-5" },
  { label: "Tasks", href: "/tasks", drawing: "M3 3h14v12H3zM6 7h8M6 11h5" },
  { label: "Rigs", href: "/rigs", drawing: "M2 15h16M4 15V5h4v10M12 15V8h4v7" },
] as const;

const Drawing = ({ d }: { d: string }) => (
  <svg width="20" height="18" fill="none" stroke="currentColor" strokeWidth="1.7" aria-hidden="true"><path d={d} /></svg>
);

function PhoneBar({ path, alarms, more, onSignOut }: { path: string; alarms: number; more: readonly Place[]; onSignOut?: () => void }) {
  const elsewhere = [...PLACES, ...more].filter((place) => !PHONE_PLACES.some(({ href }) => href === place.href));
  return (
    <nav className="phone-bar" aria-label="Main, phone">
      {PHONE_PLACES.map((place) => (
        <Link key={place.href} href={place.href} aria-current={isAt(place, path) ? "page" : undefined}>
          <Drawing d={place.drawing} />
          {place.label}
          {place.href === "/tasks" && alarms > 0 && <span className="alarm-count" aria-label={count(alarms)}>{alarms}</span>}
        </Link>
      ))}
      <Menu
        align="end"
        label="More"
        trigger={
          <button type="button" aria-current={elsewhere.some((place) => isAt(place, path)) ? "page" : undefined}>
            <Drawing d="M3 5h14M3 9.5h14M3 14h14" />More
          </button>
        }
      >
        {elsewhere.map((place) => <MenuLink key={place.href} place={place} current={isAt(place, path)} />)}
        {onSignOut && <MenuItem onSelect={onSignOut}>Sign out</MenuItem>}
      </Menu>
    </nav>
  );
}
