"use client";

import { useParentSize } from "@visx/responsive";

/** The width of the element that the reference is put on; 0 until it is known, and nothing is drawn before. */
export function useWidth(): [(node: HTMLDivElement | null) => void, number] {
  const { parentRef, width } = useParentSize({ debounceTime: 80, enableDebounceLeadingCall: true, ignoreDimensions: ["height", "top", "left"] });
  return [parentRef, Math.floor(width)];
}
