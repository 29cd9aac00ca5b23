import Link from "next/link";
import type { ReactNode } from "react";
import { classNames } from "./class-names";

/** The whole sheet: masthead, main part, phone bar. */
export function Page({ masthead, bare, children }: { masthead?: ReactNode; bare?: boolean; children: ReactNode }) {
  return (
    <div className={classNames("page", bare && "bare")}>
      {masthead}
      <main id="main" tabIndex={-1}>
        {children}
      </main>
    </div>
  );
}

type SectionProps = {
  head?: ReactNode;
  /** How to read the section, under its head. */
  note?: ReactNode;
  legend?: ReactNode;
  /** Lists of choices and fields of the margin. */
  controls?: ReactNode;
  /** The view's address, in small. */
  address?: string;
  id?: string;
  label?: string;
  className?: string;
  children: ReactNode;
};

/** Margin (head, note, legend, controls, address) and body (data only), under a rule. */
export function Section({ head, note, legend, controls, address, id, label, className, children }: SectionProps) {
  return (
    <section id={id} aria-label={label ?? (typeof head === "string" ? head : undefined)} className={classNames("page-row section", className)}>
      <div className="margin">
        {head && <h2>{head}</h2>}
        {note && <div>{note}</div>}
        {legend && <div className="legend column">{legend}</div>}
        {controls && <div className="mt-2">{controls}</div>}
        {address && <div className="address mt-3">{address}</div>}
      </div>
      <div className="body">{children}</div>
    </section>
  );
}

/** A row without a rule, for what belongs to the head of the page. */
export function PageRow({ margin, children, className }: { margin?: ReactNode; children: ReactNode; className?: string }) {
  return (
    <div className={classNames("page-row", className)}>
      <div className="margin">{margin}</div>
      <div className="body min-w-0">{children}</div>
    </div>
  );
}

/** The sentence of the page: what matters, first. */
export function PageSentence({ margin, actions, children }: { margin?: ReactNode; actions?: ReactNode; children: ReactNode }) {
  return (
    <section className="page-row page-head with-sentence">
      <div className="margin">{margin}</div>
      <div className="body">
        <h1 className="say flex-1">{children}</h1>
        {actions && <div className="buttons">{actions}</div>}
      </div>
    </section>
  );
}

export type Crumb = { label: string; href?: string };

type PageTitleProps = { margin?: ReactNode; crumbs?: readonly Crumb[]; meta?: ReactNode; tabs?: ReactNode; actions?: ReactNode; children: ReactNode };

/** Title with breadcrumb (one level up, two for a reading), a line of facts, tabs, and the verbs at the right. */
export function PageTitle({ margin, crumbs, meta, tabs, actions, children }: PageTitleProps) {
  return (
    <section className="page-row page-head">
      <div className="margin">{margin}</div>
      <div className="body">
        <div className="min-w-0">
          {crumbs && (
            <nav className="crumb" aria-label="Where this is">
              {crumbs.map(({ label, href }, i) => (
                <span key={label}>
                  {i > 0 && " / "}
                  {href ? <Link href={href}>{label}</Link> : label}
                </span>
              ))}
            </nav>
          )}
          <h1 className="title">{children}</h1>
          {meta && <div className="meta">{meta}</div>}
          {tabs}
        </div>
        {actions && <div className="buttons">{actions}</div>}
      </div>
    </section>
  );
}

export type Vital = { label: ReactNode; value: ReactNode; note?: ReactNode };

/** Up to four key values, split by hairlines. */
export function Vitals({ items }: { items: readonly Vital[] }) {
  return (
    <dl className="vitals">
      {items.map(({ label, value, note }, i) => (
        <div key={i}>
          <dt>{label}</dt>
          <dd>
            {value}
            {note && <> <small>{note}</small></>}
          </dd>
        </div>
      ))}
    </dl>
  );
}

/** Head of a part inside the body, with a quiet remark at its right. */
export function Head({ children, remark }: { children: ReactNode; remark?: ReactNode }) {
  return (
    <div className="head">
      <div>{children}</div>
      {remark && <span>{remark}</span>}
    </div>
  );
}
