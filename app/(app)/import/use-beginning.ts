"use client";

import { useEffect, useState } from "react";
import { readBeginning, type Beginning } from "@/lib/imports/preview";
import type { Format } from "@/lib/imports/schema";

type Read = { file: File; beginning?: Beginning; problem?: string };

/** The first rows of the chosen file, read in the browser; anew when it is to be read otherwise. */
export function useBeginning(file: File | undefined, { delimiter, encoding, headerLine, firstLine }: Format): Omit<Read, "file"> & { reading: boolean } {
  const [read, setRead] = useState<Read>();
  useEffect(() => {
    if (!file) return;
    let stale = false;
    readBeginning(file, { delimiter, encoding, headerLine, firstLine }).then(
      (beginning) => stale || setRead({ file, beginning }),
      (error: unknown) => stale || setRead({ file, problem: error instanceof RangeError ? error.message : "the browser could not read it" }),
    );
    return () => {
      stale = true;
    };
  }, [file, delimiter, encoding, headerLine, firstLine]);
  const current = read?.file === file ? read : undefined;
  return { beginning: current?.beginning, problem: current?.problem, reading: file !== undefined && !current };
}
