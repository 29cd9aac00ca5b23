"use client";

import { useState } from "react";
import { Button } from "./button";

/** A secret between two ink lines, with Copy. When it is put away nobody sees it again. */
export function ShownOnce({ secret, onPutAway }: { secret: string; onPutAway: () => void }) {
  const [copied, setCopied] = useState(false);
  return (
    <div className="mt-3 border-y border-ink py-3">
      <code className="num block font-sans font-semibold whitespace-normal [overflow-wrap:anywhere]">{secret}</code>
      <div className="buttons mt-3">
        <Button look="primary" onClick={() => void navigator.clipboard.writeText(secret).then(() => setCopied(true))}>Copy</Button>
        <Button onClick={onPutAway}>Put away</Button>
        <span className="small text-ink2" role="status">{copied && "Copied"}</span>
      </div>
    </div>
  );
}
