"use client";

import { Toaster as Sonner } from "sonner";

/** Short answers of the page, said politely: `Paused after repeat 188.` Once in the shell; pages call `toast` of sonner. */
export function Toaster() {
  return (
    <Sonner
      position="bottom-left"
      offset={{ bottom: 24, left: 24 }}
      mobileOffset={{ bottom: 76 }}
      duration={6000}
      toastOptions={{
        unstyled: true,
        classNames: { toast: "tip flex items-center gap-3 w-[356px] max-w-[calc(100vw-32px)]", title: "font-semibold", actionButton: "underline underline-offset-[3px] ml-auto", cancelButton: "underline underline-offset-[3px]" },
      }}
    />
  );
}
