import { infiniteQueryOptions, queryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import {
  auditPage,
  invitationsPage,
  meAnswer,
  peoplePage,
  tokensPage,
  type AuditEventAnswer,
  type InvitationAnswer,
  type PersonAnswer,
} from "@/lib/people/schema";

type PageOf<T> = { items: T[]; nextCursor: string | null };
const after = (cursor: string | null) => (cursor ? `&cursor=${encodeURIComponent(cursor)}` : "");

/** The person, the laboratory and the count of alarms, asked again while the page is looked at. */
export const meOptions = () =>
  queryOptions({
    queryKey: ["me"],
    queryFn: ({ signal }) => fetchJson("/api/me", { answer: meAnswer, signal }),
    refetchInterval: 15_000,
  });

export const peopleOptions = () =>
  infiniteQueryOptions({
    queryKey: ["people"],
    queryFn: ({ signal, pageParam }): Promise<PageOf<PersonAnswer>> => fetchJson(`/api/people?limit=200${after(pageParam)}`, { answer: peoplePage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: PageOf<PersonAnswer>) => nextCursor,
  });

export const invitationsOptions = () =>
  infiniteQueryOptions({
    queryKey: ["invitations"],
    queryFn: ({ signal, pageParam }): Promise<PageOf<InvitationAnswer>> =>
      fetchJson(`/api/invitations?limit=50${after(pageParam)}`, { answer: invitationsPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: PageOf<InvitationAnswer>) => nextCursor,
  });

export const ownTokensOptions = () =>
  queryOptions({
    queryKey: ["own tokens"],
    queryFn: ({ signal }) => fetchJson("/api/tokens?limit=200", { answer: tokensPage, signal }),
  });

export type AuditFilter = { personId?: string; entity?: string; entityId?: string; since?: string };

export const auditOptions = (filter: AuditFilter) =>
  infiniteQueryOptions({
    queryKey: ["audit", filter],
    queryFn: ({ signal, pageParam }): Promise<PageOf<AuditEventAnswer>> =>
      fetchJson(`/api/audit?limit=50${after(pageParam)}&${new URLSearchParams(given(filter))}`, { answer: auditPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: PageOf<AuditEventAnswer>) => nextCursor,
  });

const given = (filter: AuditFilter) => Object.entries(filter).filter((entry): entry is [string, string] => Boolean(entry[1]));
