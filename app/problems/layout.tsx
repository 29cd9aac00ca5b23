import Link from "next/link";
import type { ReactNode } from "react";
import { Page } from "@/components/ui/page";
import { ReedMark } from "@/components/ui/reed-mark";

/** Open to everybody: a program that meets a problem has no session. */
export default function ProblemsLayout({ children }: { children: ReactNode }) {
  const masthead = (
    <header className="page-row masthead">
      <Link className="wordmark" href="/"><ReedMark />Longreed</Link>
    </header>
  );
  return <Page bare masthead={masthead}>{children}</Page>;
}
