import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { WithCode } from "@/components/ui/with-code";
import { isProblemCode, problemType } from "@/lib/problem-types";

type Params = Promise<{ code: string }>;

export async function generateMetadata({ params }: { params: Params }): Promise<Metadata> {
  return { title: (await params).code };
}

export default async function ProblemPage({ params }: { params: Params }) {
  const { code } = await params;
  if (!isProblemCode(code)) notFound();
  const { status, means, remedy, calls } = problemType(code);
  return (
    <>
      <PageTitle crumbs={[{ label: "Problem types", href: "/problems" }]} meta={`Status ${status}`}>{code}</PageTitle>
      <Section head="What it means"><p className="say-small"><WithCode>{means}</WithCode></p></Section>
      <Section head="What to do"><p><WithCode>{remedy}</WithCode></p></Section>
      <Section head="Where it comes from">
        {calls ? (
          <ul className="grid gap-1">{calls.map((call) => <li key={call}><code>{call}</code></li>)}</ul>
        ) : (
          <p>Any call that it applies to can answer so; the API reference lists it with each.</p>
        )}
      </Section>
    </>
  );
}
