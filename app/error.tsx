"use client";

import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/states";

export default function RootError({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <Page bare>
      <div className="page-row page-head sentence">
        <div className="margin" />
        <div className="body">
          <Problem title="Longreed could not make this page." error={{ digest: error.digest }} onRetry={reset}>
            Nothing was changed. Rigs go on by themselves; what they send is kept.
          </Problem>
        </div>
      </div>
    </Page>
  );
}
