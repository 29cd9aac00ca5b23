import { infiniteQueryOptions } from "@tanstack/react-query";
import { fetchJson } from "@/lib/http/fetch-json";
import { notificationPage, type NotificationAnswer } from "@/lib/notifications/schema";
import { created } from "@/lib/schema";

type NotificationPage = { items: NotificationAnswer[]; nextCursor: string | null };

/** Mail that could not be delivered. */
export const deadLettersOptions = () =>
  infiniteQueryOptions({
    queryKey: ["notifications", "failed"],
    queryFn: ({ signal, pageParam }): Promise<NotificationPage> =>
      fetchJson(`/api/notifications?state=failed${pageParam ? `&cursor=${encodeURIComponent(pageParam)}` : ""}`, { answer: notificationPage, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: ({ nextCursor }: NotificationPage) => nextCursor,
    refetchInterval: 30_000,
  });

export const sendAgain = (id: string) => fetchJson(`/api/notifications/${id}/send-again`, { method: "POST", answer: created });
