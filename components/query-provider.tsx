"use client";

import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";
import { ProblemError } from "@/lib/http/fetch-json";

/** A refusal stays one however often it is asked for; what did not answer may answer yet. */
const worthAnotherTry = (failures: number, error: Error) =>
  failures < 3 && (!(error instanceof ProblemError) || error.status === 0 || error.status >= 500 || error.status === 429);

export function QueryProvider({ children }: { children: ReactNode }) {
  const [client] = useState(
    () => new QueryClient({ defaultOptions: { queries: { staleTime: 5000, retry: worthAnotherTry }, mutations: { retry: false } } }),
  );
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}
