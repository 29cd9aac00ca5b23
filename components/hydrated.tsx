import { dehydrate, HydrationBoundary, QueryClient, type QueryKey } from "@tanstack/react-query";
import type { ReactNode } from "react";

type HydratedProps = {
  /** What the page has read already, under the keys of the queries that will follow it. */
  data: readonly (readonly [key: QueryKey, value: unknown])[];
  children: ReactNode;
};

/** Gives the browser's queries what the server read for the page, so that the first paint has its numbers. */
export function Hydrated({ data, children }: HydratedProps) {
  const client = new QueryClient();
  for (const [key, value] of data) client.setQueryData(key, value);
  return <HydrationBoundary state={dehydrate(client)}>{children}</HydrationBoundary>;
}
