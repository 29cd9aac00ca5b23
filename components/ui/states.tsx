"use client";

import { useState, type ReactNode } from "react";
import { formatDurationInWords } from "@/lib/format-time";
import { Button } from "./button";

/** The empty baseline, one sentence, what follows from it, the next action. */
export function Empty({ children, note, actions }: { children: ReactNode; note?: ReactNode; actions?: ReactNode }) {
  return (
    <div className="max-w-[44em]">
      <div className="empty-line" aria-hidden="true" />
      <p className="say-small">{children}</p>
      {note && <p className="small mt-1 text-ink2">{note}</p>}
      {actions && <div className="buttons mt-3">{actions}</div>}
    </div>
  );
}

/** Nothing before 400 ms, then a line that fills where the data will be. `height` keeps the page from jumping. */
export function Loading({ label, height, children }: { label: string; height?: number; children?: ReactNode }) {
  return (
    <div role="status" aria-label={`Reading ${label}`} style={{ minHeight: height }}>
      <div className="after-400ms">
        <div className="filling-line unknown mb-2" aria-hidden="true"><i /></div>
        <p className="say-small">Reading {label}.</p>
        {children}
      </div>
    </div>
  );
}

type LongRunningProps = { children: ReactNode; /** 0 to 1 where known. */ share?: number; secondsLeft?: number; onCancel?: () => void };

/** What is being worked out, how long still, that one can leave, Cancel. */
export function LongRunning({ children, share, secondsLeft, onCancel }: LongRunningProps) {
  return (
    <div role="status" className="max-w-[44em]">
      <p className="say-small">{children}</p>
      <div
        className={share === undefined ? "filling-line unknown my-2" : "filling-line my-2"}
        style={share === undefined ? undefined : ({ "--share": Math.min(1, Math.max(0, share)) } as React.CSSProperties)}
        aria-hidden="true"
      >
        <i />
      </div>
      <p className="small text-ink2">
        {secondsLeft !== undefined && `About ${formatDurationInWords(secondsLeft)} left. `}You can leave, the result stays here.
      </p>
      {onCancel && <div className="buttons mt-3"><Button small onClick={onCancel}>Cancel</Button></div>}
    </div>
  );
}

type ProblemProps = {
  /** What failed, in a sentence. */
  title?: ReactNode;
  /** An Error, a problem+json answer, or what else was caught. Its message or title stands where `title` is absent. */
  error?: unknown;
  /** What was kept, and what to try. */
  children?: ReactNode;
  onRetry?: () => void;
  retry?: string;
  actions?: ReactNode;
};

const text = (value: unknown, key: string): string | undefined => {
  const found = typeof value === "object" && value !== null ? (value as Record<string, unknown>)[key] : undefined;
  return typeof found === "string" && found !== "" ? found : undefined;
};

/** What failed, what was kept, what to try; the trace id is in Details. */
export function Problem({ title, error, children, onRetry, retry = "Try again", actions }: ProblemProps) {
  const [shown, setShown] = useState(false);
  const detail = text(error, "detail");
  const trace = text(error, "traceId") ?? text(error, "requestId") ?? text(error, "digest");
  return (
    <div role="alert" className="max-w-[44em]">
      <p className="say-small">{title ?? text(error, "title") ?? text(error, "message") ?? "This did not work."}</p>
      {(children ?? detail) && <div className="small mt-1 text-ink2">{children ?? detail}</div>}
      <div className="buttons mt-3">
        {onRetry && <Button small onClick={onRetry}>{retry}</Button>}
        {actions}
        {trace && <Button small look="link" aria-expanded={shown} onClick={() => setShown(!shown)}>Details</Button>}
      </div>
      {shown && trace && <p className="address mt-2">Trace {trace}</p>}
    </div>
  );
}

/** The device has no network. `kept`: what people do meanwhile is kept and sent by itself. */
export function NoNetwork({ since, kept }: { since: string; kept?: boolean }) {
  return (
    <p role="status" className="mt-3 flex items-baseline gap-2.5 text-ink2">
      <svg width="22" height="14" fill="none" stroke="var(--ink)" aria-hidden="true" className="flex-none self-center">
        <path d="M0 7h8" strokeWidth="2.2" />
        <path d="M11 7h11" strokeWidth="2.2" strokeDasharray="2 3" />
      </svg>
      <span><b className="text-ink">No network since {since}.</b> Shown as of then.{kept && " Answers are kept and sent by themselves."}</span>
    </p>
  );
}

/** The data stay readable while Longreed cannot be reached. */
export function Offline({ asOf, onTryNow }: { asOf: string; onTryNow?: () => void }) {
  return (
    <div role="status" className="max-w-[44em]">
      <p className="say-small">Shown as of {asOf}.</p>
      <p className="small text-ink2">Longreed cannot be reached from this computer. Rigs are not affected.</p>
      {onTryNow && <div className="buttons mt-3"><Button small onClick={onTryNow}>Try now</Button></div>}
    </div>
  );
}
