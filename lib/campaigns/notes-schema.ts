import { z } from "zod";
import { pageOf } from "@/lib/http/paging";
import { words } from "@/lib/schema";

export const noteBody = z.strictObject({ text: words(5000) });

export const noteAnswer = z.object({ id: z.string(), text: z.string(), by: z.string(), role: z.string(), at: z.string() });

export const notePage = pageOf(noteAnswer);

export type NoteAnswer = z.output<typeof noteAnswer>;
