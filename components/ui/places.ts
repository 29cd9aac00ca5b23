export type Place = { label: string; href: string; key?: string };

/** The menu, in its order; `key` follows `g`. */
export const PLACES: readonly Place[] = [
  { label: "Today", href: "/", key: "t" },
  { label: "Campaigns", href: "/campaigns", key: "c" },
  { label: "Protocols", href: "/protocols", key: "p" },
  { label: "Sensors", href: "/sensors", key: "s" },
  { label: "Rigs", href: "/rigs", key: "r" },
  { label: "Liquids", href: "/liquids", key: "l" },
];

/** What stands under More. The shell leaves out what the person may not open. */
export const MORE_PLACES: readonly Place[] = [
  { label: "Find", href: "/find", key: "f" },
  { label: "Alarms", href: "/alarms", key: "a" },
  { label: "Tasks", href: "/tasks", key: "k" },
  { label: "Import", href: "/import", key: "i" },
  { label: "People", href: "/people", key: "e" },
  { label: "Audit log", href: "/audit", key: "u" },
  { label: "API reference", href: "/api-reference" },
  { label: "Settings", href: "/settings", key: "," },
];

export const isAt = (place: Place, path: string): boolean => (place.href === "/" ? path === "/" : path === place.href || path.startsWith(`${place.href}/`));
