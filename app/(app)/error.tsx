"use client";

import { Problem } from "@/components/ui/states";

export default function AppError({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <div className="page-row page-head sentence">
      <div className="margin" />
      <div className="body">
        <Problem title="This page could not be made." error={{ digest: error.digest }} onRetry={reset}>
          Nothing was changed. Rigs go on by themselves.
        </Problem>
      </div>
    </div>
  );
}
