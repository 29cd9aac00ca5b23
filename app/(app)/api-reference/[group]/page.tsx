import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { openApi } from "@/app/api/openapi";
import { PageTitle, Section } from "@/components/ui/page";
import { referenceOf, schemasOf } from "@/lib/http/reference";
import { currentPerson } from "@/lib/people/current-person";
import { FieldsTable } from "../fields-table";
import { CallSection } from "./call-section";
import "../reference.css";

type Params = Promise<{ group: string }>;

export async function generateMetadata({ params }: { params: Params }): Promise<Metadata> {
  const { group } = await find(params);
  return { title: `${group?.title ?? "No such page"}, API reference` };
}

export default async function ApiReferenceGroupPage({ params }: { params: Params }) {
  await currentPerson();
  const { document, group } = await find(params);
  if (!group) notFound();
  const schemas = schemasOf(document, group.calls);
  const names = new Set(schemas.map(({ name }) => name));
  return (
    <>
      <PageTitle crumbs={[{ label: "API reference", href: "/api-reference" }]}>{group.title}</PageTitle>
      {group.calls.map((call) => <CallSection key={call.id} call={call} schemas={names} />)}
      {schemas.map(({ name, fields }) => (
        <Section key={name} id={`schema-${name}`} head={name} note="A part of bodies or answers above">
          <FieldsTable label={name} fields={fields} schemas={names} />
        </Section>
      ))}
    </>
  );
}

async function find(params: Params) {
  const document = await openApi();
  const { group: id } = await params;
  return { document, group: referenceOf(document).find((group) => group.id === id) };
}
