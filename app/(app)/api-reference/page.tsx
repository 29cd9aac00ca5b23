import type { Metadata } from "next";
import Link from "next/link";
import { openApi } from "@/app/api/openapi";
import { PageRow, PageSentence, Section } from "@/components/ui/page";
import { WithCode } from "@/components/ui/with-code";
import { capitalised, inWords } from "@/lib/format";
import { referenceOf } from "@/lib/http/reference";
import { currentPerson } from "@/lib/people/current-person";
import { CallName } from "./call-name";
import "./reference.css";

export const metadata: Metadata = { title: "API reference" };

export default async function ApiReferencePage() {
  await currentPerson();
  const groups = referenceOf(await openApi());
  const calls = groups.reduce((sum, group) => sum + group.calls.length, 0);
  return (
    <>
      <PageSentence>{capitalised(inWords(calls))} calls, for rig agents and for scripts.</PageSentence>
      <PageRow className="mt-4">
        <div className="reference-text">
          <p>
            A script sends a personal token, made in <Link href="/settings">Settings</Link>, as <code>Authorization: Bearer</code>; a rig’s agent sends the rig’s token.
            Bodies and answers are JSON. Times are RFC 3339 in UTC, units stand in the names, ids are opaque. Fields of an answer that you do not know are to be ignored: changes only add.
          </p>
          <p>
            Lists answer <code>items</code> and <code>nextCursor</code>, to be sent back as <code>cursor</code>. A POST with an <code>Idempotency-Key</code> may be sent again: it takes effect once.
            Refusals are <code>application/problem+json</code> (RFC 9457); each of their types has <Link href="/problems">a page</Link>.
          </p>
          <p>
            The same for programs: <a href="/api/openapi.json">/api/openapi.json</a>, OpenAPI 3.1.
          </p>
        </div>
      </PageRow>
      {groups.map(({ id, title, calls: own }) => (
        <Section key={id} id={id} head={<Link href={`/api-reference/${id}`}>{title}</Link>} label={title}>
          <ul className="call-list">
            {own.map((call) => (
              <li key={call.id}>
                <Link href={`/api-reference/${id}#${call.id}`}><CallName method={call.method} path={call.path} /></Link>
                <span><WithCode>{call.summary}</WithCode></span>
              </li>
            ))}
          </ul>
        </Section>
      ))}
    </>
  );
}
