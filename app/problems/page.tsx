import type { Metadata } from "next";
import Link from "next/link";
import { PageTitle, Section } from "@/components/ui/page";
import { WithCode } from "@/components/ui/with-code";
import { PROBLEM_CODES, PROBLEM_TYPES } from "@/lib/problem-types";

export const metadata: Metadata = { title: "Problem types" };

export default function ProblemsPage() {
  const statuses = [...new Set(PROBLEM_CODES.map((code) => PROBLEM_TYPES[code].status))].toSorted((a, b) => a - b);
  return (
    <>
      <PageTitle meta="What a call of Longreed can answer instead of what was asked for">Problem types</PageTitle>
      {statuses.map((status) => (
        <Section key={status} head={String(status)} label={`Status ${status}`}>
          <dl className="grid max-w-[44em] gap-3">
            {PROBLEM_CODES.filter((code) => PROBLEM_TYPES[code].status === status).map((code) => (
              <div key={code}>
                <dt className="font-semibold"><Link href={`/problems/${code}`}>{code}</Link></dt>
                <dd className="text-ink2"><WithCode>{PROBLEM_TYPES[code].means}</WithCode></dd>
              </div>
            ))}
          </dl>
        </Section>
      ))}
    </>
  );
}
