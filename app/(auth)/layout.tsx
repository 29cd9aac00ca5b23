import Link from "next/link";
import type { ReactNode } from "react";
import { ReedMark } from "@/components/ui/reed-mark";
import "./sign-in.css";

export default function AuthLayout({ children }: { children: ReactNode }) {
  return (
    <div className="page bare sign-in">
      <header className="page-row masthead">
        <Link className="wordmark" href="/"><ReedMark />Longreed</Link>
      </header>
      {children}
    </div>
  );
}
