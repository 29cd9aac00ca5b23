import Link from "next/link";
import { Section } from "@/components/ui/page";
import { WithCode } from "@/components/ui/with-code";
import type { ReferenceCall } from "@/lib/http/reference";
import { PROBLEM_TYPES } from "@/lib/problem-types";
import { CallName } from "../call-name";
import { FieldsTable } from "../fields-table";

/** One call: who may, what goes in, what comes out, what can stand in the way, and how to try it. */
export function CallSection({ call, schemas }: { call: ReferenceCall; schemas: ReadonlySet<string> }) {
  const { id, method, path, summary, description, who, parameters, body, answers, problems, curl } = call;
  const plain = summary.replaceAll("`", "");
  return (
    <Section
      id={id}
      label={`${method} ${path}`}
      head={<WithCode>{summary}</WithCode>}
      note={<>For {who}.</>}
      address={`#${id}`}
    >
      <h3 className="call-head"><a href={`#${id}`}><CallName method={method} path={path} /></a></h3>
      {description && <p className="reference-text mt-2"><WithCode>{description}</WithCode></p>}
      {parameters.length > 0 && <Part title="Parameters"><FieldsTable label={`Parameters of ${plain}`} fields={parameters} schemas={schemas} /></Part>}
      {body && (
        <Part title="Body" remark={body.type}>
          {body.fields.length > 0 && <FieldsTable label={`Body of ${plain}`} fields={body.fields} schemas={schemas} />}
          {body.whole && <p className="text-ink2">{body.whole}</p>}
          {body.examples.map(({ summary: what, json }) => (
            <details key={what}>
              <summary>Example: {what}</summary>
              <pre tabIndex={0}>{json}</pre>
            </details>
          ))}
        </Part>
      )}
      {answers.map(({ status, types, fields, whole, example }) => (
        <Part key={status} title={`Answer ${status}`} remark={types.join(", ")}>
          {fields.length > 0 && (
            <details open={fields.length <= 8}>
              <summary>{fields.length <= 8 ? "Fields" : `${fields.length} fields`}</summary>
              <FieldsTable label={`Answer of ${plain}`} fields={fields} schemas={schemas} />
            </details>
          )}
          {fields.length === 0 && <p className="text-ink2">{types.length === 0 ? "Nothing is in it." : whole}</p>}
          {example && (
            <details>
              <summary>Example</summary>
              <pre tabIndex={0}>{example}</pre>
            </details>
          )}
        </Part>
      ))}
      <Part title="Problems">
        <p className="problem-links">
          {problems.map((code) => <Link key={code} href={`/problems/${code}`}>{PROBLEM_TYPES[code].status} {code}</Link>)}
        </p>
      </Part>
      <Part title="By hand"><pre tabIndex={0}>{curl}</pre></Part>
    </Section>
  );
}

function Part({ title, remark, children }: { title: string; remark?: string; children: React.ReactNode }) {
  return (
    <div className="call-part">
      <h4 className="head"><span className="part-title">{title}</span>{remark && <span>{remark}</span>}</h4>
      {children}
    </div>
  );
}
