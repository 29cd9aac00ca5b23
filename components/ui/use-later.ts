"use client";

import { useEffect, useState } from "react";

/** The value as it stood once it had not changed for so long: what follows typing without asking at each key. */
export function useLater<T>(value: T, ms: number): T {
  const [later, setLater] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setLater(value), ms);
    return () => clearTimeout(timer);
  }, [value, ms]);
  return later;
}
