"use client";

import { useEffect, useState } from "react";

/** Since when the browser has had no network; undefined while it has. */
export function useOfflineSince(): string | undefined {
  const [since, setSince] = useState<string>();
  useEffect(() => {
    const look = () => setSince((before) => (navigator.onLine ? undefined : (before ?? new Date().toISOString())));
    look();
    window.addEventListener("online", look);
    window.addEventListener("offline", look);
    return () => {
      window.removeEventListener("online", look);
      window.removeEventListener("offline", look);
    };
  }, []);
  return since;
}
