"use client";

import { useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { signOut } from "next-auth/react";
import { Masthead } from "@/components/ui/masthead";
import { MORE_PLACES } from "@/components/ui/places";
import { findNow } from "@/lib/find/client";
import { KIND_WORDS } from "@/lib/find/kind-words";
import { meOptions } from "@/lib/people/client";
import type { MeAnswer } from "@/lib/people/schema";
import { mayOpen } from "@/lib/permissions";

const onFind = async (words: string, signal: AbortSignal) => {
  const { items, totals } = await findNow(words, signal);
  const hits = items.slice(0, 9).map(({ kind, id, retired, ...found }) => ({ ...found, key: `${kind} ${id}`, kind: KIND_WORDS[kind].one, quiet: retired }));
  return { hits, total: Object.values(totals).reduce((sum, n) => sum + n, 0) };
};

/** The masthead with who is signed in, kept fresh. */
export function TopOfPage({ me, demo }: { me: MeAnswer; demo: boolean }) {
  const router = useRouter();
  const { data } = useQuery({ ...meOptions(), initialData: me });
  const leave = async () => {
    await signOut({ redirect: false });
    router.replace("/sign-in");
    router.refresh();
  };
  return (
    <Masthead
      now={data.serverTime}
      zone={data.laboratory.timeZone}
      person={{ name: data.name, role: data.role }}
      alarms={data.alarms}
      more={MORE_PLACES.filter(({ href }) => mayOpen(data.role, href))}
      demo={demo && <><b>A demo laboratory.</b> Rigs, liquids and people are invented; mail stays on this machine.</>}
      onFind={onFind}
      onSignOut={() => void leave()}
    />
  );
}
