import type { Metadata } from "next";
import Form from "next/form";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { PageRow, PageSentence, Section } from "@/components/ui/page";
import { Empty } from "@/components/ui/states";
import { find } from "@/lib/find/find";
import { KIND_WORDS } from "@/lib/find/kind-words";
import type { FindAnswer, FoundKind } from "@/lib/find/schema";
import { capitalised, inWords, plural } from "@/lib/format";
import { currentPerson } from "@/lib/people/current-person";
import { FoundTable } from "./found-table";

export const metadata: Metadata = { title: "Find" };

const OF_EACH_KIND = 50;

export default async function FindPage({ searchParams }: { searchParams: Promise<{ q?: string | string[] }> }) {
  const by = await currentPerson();
  const given = (await searchParams).q;
  const q = (typeof given === "string" ? given : "").trim().slice(0, 100);
  const found = q === "" ? undefined : await find({ by, q, limit: OF_EACH_KIND });
  return (
    <>
      <PageSentence>{sentenceOf(q, found)}</PageSentence>
      <PageRow className="mt-4">
        <Form action="/find" role="search" aria-label="Find with all answers" className="flex max-w-130 items-end gap-2">
          <TextField key={q} className="flex-1" type="search" name="q" label="Words" defaultValue={q} maxLength={100} autoFocus={q === ""} hint={found ? undefined : "A serial number, a lot, a name, or a campaign’s number as C-118"} />
          {found && <div className="mb-1"><Button type="submit">Find</Button></div>}
        </Form>
      </PageRow>
      {found && kindsOf(found).map((kind) => <FoundOfKind key={kind} kind={kind} q={q} found={found} />)}
      {found?.items.length === 0 && (
        <Section label="Nothing found">
          <Empty note="Each word must occur in the name, number, lot, serial number, sensor or rig. Fewer or shorter words find more.">
            No campaign, sensor, liquid, lot, rig or protocol has “{q}” in it.
          </Empty>
        </Section>
      )}
    </>
  );
}

function sentenceOf(q: string, found?: FindAnswer): string {
  if (!found) return "Find a campaign, sensor, liquid, lot, rig or protocol.";
  const total = Object.values(found.totals).reduce((sum, n) => sum + n, 0);
  return total === 0 ? `Nothing was found for “${q}”.` : `${capitalised(inWords(total))} ${plural(total, "thing")} with “${q}”.`;
}

/** The kind of the best find first. */
const kindsOf = ({ items }: FindAnswer): FoundKind[] => [...new Set(items.map(({ kind }) => kind))];

function FoundOfKind({ kind, q, found }: { kind: FoundKind; q: string; found: FindAnswer }) {
  const items = found.items.filter((item) => item.kind === kind);
  const total = found.totals[kind] ?? items.length;
  const { many, list } = KIND_WORDS[kind];
  return (
    <Section head={many} note={total > items.length ? `The first ${items.length} of ${total}. More words find fewer.` : undefined} address={total > items.length ? `${list}?${new URLSearchParams({ search: q })}` : undefined}>
      <FoundTable label={many} items={items} />
    </Section>
  );
}
