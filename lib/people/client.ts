import { queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { meAnswer } from "@/lib/people/schema";

/** The person, the laboratory and the count of alarms, asked again while the page is looked at. */
export const meOptions = () =>
  queryOptions({
    queryKey: ["me"],
    queryFn: ({ signal }) => fetchJson("/api/me", { answer: meAnswer, signal }),
    refetchInterval: 15_000,
  });
