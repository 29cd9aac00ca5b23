"use client";

import { useQueryClient } from "@tanstack/react-query";
import { createContext, useContext, useEffect, useMemo, useSyncExternalStore, type ReactNode } from "react";
import { toast } from "sonner";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { meAnswer } from "@/lib/people/schema";
import { Outbox, type KeptAnswer } from "@/lib/tasks/outbox";

const TRY_AGAIN_MS = 10_000;
const CHANGED_BY_ANSWERS = ["tasks", "today", "rigs", "sensors", "campaigns", "alarms"];

const NONE: readonly KeptAnswer[] = [];
const OutboxContext = createContext<Outbox | undefined>(undefined);

/** Sends what a person's answers left on this device, on whatever page: at once, when the network is back, and every ten seconds. */
export function OutboxProvider({ personId, children }: { personId: string; children: ReactNode }) {
  const queries = useQueryClient();
  const outbox = useMemo(() => {
    const send = async (answer: KeptAnswer) => {
      if (answer.tries > 0) await demandSamePerson(personId);
      await fetchJson(answer.path, { method: "POST", body: answer.body, idempotencyKey: answer.key });
      await Promise.all(CHANGED_BY_ANSWERS.map((key) => queries.invalidateQueries({ queryKey: [key] })));
      toast(`${answer.verb}: ${answer.title}`);
    };
    return typeof window === "undefined" ? undefined : new Outbox({ personId, shelf: window.localStorage, send });
  }, [personId, queries]);

  useEffect(() => {
    if (!outbox) return;
    const go = () => void outbox.sendAll();
    go();
    const timer = setInterval(go, TRY_AGAIN_MS);
    window.addEventListener("online", go);
    window.addEventListener("storage", outbox.changed);
    return () => {
      clearInterval(timer);
      window.removeEventListener("online", go);
      window.removeEventListener("storage", outbox.changed);
    };
  }, [outbox]);
  return <OutboxContext value={outbox}>{children}</OutboxContext>;
}

/** The answers kept on this device, and how to give one. */
export function useOutbox() {
  const outbox = useContext(OutboxContext);
  const items = useSyncExternalStore(outbox?.subscribe ?? noWait, outbox?.items ?? nothing, nothing);
  return {
    items,
    give: (answer: Omit<KeptAnswer, "key" | "at" | "tries" | "refusal"> & { key?: string }) =>
      void outbox?.give({ ...answer, key: answer.key ?? crypto.randomUUID(), at: new Date().toISOString() }),
    takeBack: (key: string) => outbox?.takeBack(key),
  };
}

const noWait = () => () => {};
const nothing = () => NONE;

/** Somebody else may have signed in on this device since: the answer is not theirs. */
async function demandSamePerson(personId: string): Promise<void> {
  const { id } = await fetchJson("/api/me", { answer: meAnswer });
  if (id !== personId) throw new ProblemError("not-signed-in", 401, "Somebody else is signed in", "It waits until you sign in again.");
}
