"use client";

import { useEffect, useRef } from "react";

/** Puts the focus on the field that was asked for when a sheet opens, else on its first. */
export function useFocusField(isOpen: boolean, field: string | undefined) {
  const sheet = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (!isOpen) return;
    const controls = [...(sheet.current?.querySelectorAll<HTMLElement>("[data-field]") ?? [])];
    const wanted = field === undefined ? undefined : controls.find(({ dataset }) => dataset.field === field) ?? controls.find(({ dataset }) => dataset.field?.startsWith(`${field}.`) || field.startsWith(`${dataset.field}.`));
    const control = wanted ?? controls.at(0);
    control?.focus();
    if (control instanceof HTMLInputElement && control.type === "text") control.select();
  }, [isOpen, field]);
  return sheet;
}
