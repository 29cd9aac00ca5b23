"use client";

import { localPoint } from "@visx/event";
import { useState, type PointerEvent } from "react";

const SHORTEST_DRAG_PX = 6;

type DragWindow = {
  /** Left and right end of what may be dragged over. */
  left?: number;
  width: number;
  onWindow?: (x0: number, x1: number) => void;
  /** Pointer without a button, in pixels from the left of the drawing. */
  onMove?: (x: number) => void;
  onLeave?: () => void;
  /** A press that was no drag. */
  onPress?: () => void;
};

/** A drag along x that ends as a window; shorter than 6 px it is a press. Escape is the caller's. */
export function useDragWindow({ left = 0, width, onWindow, onMove, onLeave, onPress }: DragWindow) {
  const [drag, setDrag] = useState<{ from: number; to: number }>();
  const clamp = (x: number) => Math.max(left, Math.min(left + width, x));
  const at = (event: PointerEvent<SVGSVGElement>) => clamp(localPoint(event.currentTarget, event)?.x ?? left);

  const handlers = {
    onPointerDown: (event: PointerEvent<SVGSVGElement>) => {
      if (!onWindow || event.button !== 0 || event.pointerType === "touch") return;
      event.currentTarget.setPointerCapture(event.pointerId);
      setDrag({ from: at(event), to: at(event) });
    },
    onPointerMove: (event: PointerEvent<SVGSVGElement>) => {
      const x = at(event);
      if (drag) setDrag({ ...drag, to: x });
      onMove?.(x);
    },
    onPointerUp: () => {
      if (drag && Math.abs(drag.to - drag.from) < SHORTEST_DRAG_PX) onPress?.();
      if (drag && Math.abs(drag.to - drag.from) >= SHORTEST_DRAG_PX) onWindow?.(Math.min(drag.from, drag.to), Math.max(drag.from, drag.to));
      setDrag(undefined);
    },
    onPointerCancel: () => setDrag(undefined),
    onPointerLeave: () => onLeave?.(),
  };
  const band = drag && Math.abs(drag.to - drag.from) >= SHORTEST_DRAG_PX ? { x0: Math.min(drag.from, drag.to), x1: Math.max(drag.from, drag.to) } : undefined;
  return { handlers, band };
}
