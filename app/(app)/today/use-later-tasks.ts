"use client";

import { useSyncExternalStore } from "react";
import { z } from "zod";

const PLACE = "longreed later";
const LATER_MS = 4 * 3_600_000;

/** By task until when it is put off. */
const laterSchema = z.record(z.string(), z.string());
type Later = z.output<typeof laterSchema>;

const listeners = new Set<() => void>();
const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => void listeners.delete(listener);
};
const read = () => localStorage.getItem(PLACE) ?? "";

/** Tasks that a person has put off on this device: Today leaves them out for four hours, Tasks never does. */
export function useLaterTasks() {
  const later = laterOf(useSyncExternalStore(subscribe, read, () => ""));
  return {
    isLater: (taskId: string, now: string) => Date.parse(later[taskId] ?? "") > Date.parse(now),
    putOff: (taskId: string, now: string) => {
      const still = Object.entries(later).filter(([, until]) => Date.parse(until) > Date.parse(now));
      const next: Later = { ...Object.fromEntries(still), [taskId]: new Date(Date.parse(now) + LATER_MS).toISOString() };
      localStorage.setItem(PLACE, JSON.stringify(next));
      listeners.forEach((listener) => listener());
    },
  };
}

/** What was kept on this device; nothing where it cannot be read. */
function laterOf(text: string): Later {
  try {
    return laterSchema.parse(JSON.parse(text));
  } catch {
    return {};
  }
}
