import { POST } from "@/app/api/imports/route";
import type { Role } from "@/lib/permissions";
import { at, ORIGIN, signedInAs } from "./session";

export type Upload = { file?: string | Uint8Array<ArrayBuffer>; fileName?: string; fields?: Record<string, string | object>; role?: Role; cookie?: string; headers?: Record<string, string> };

export function formOf({ file, fileName = "readings.csv", fields = {} }: Pick<Upload, "file" | "fileName" | "fields">): FormData {
  const form = new FormData();
  if (file !== undefined) form.set("file", new File([file], fileName));
  for (const [name, value] of Object.entries({ name: "Old readings", ...fields })) form.set(name, typeof value === "string" ? value : JSON.stringify(value));
  return form;
}

/** Sends a file as a browser does. */
export async function upload({ role = "researcher", cookie, headers = {}, ...form }: Upload): Promise<{ status: number; body: Record<string, unknown> }> {
  const request = new Request(`${ORIGIN}/api/imports`, { method: "POST", headers: { cookie: cookie ?? (await signedInAs(role)).cookie, origin: ORIGIN, ...headers }, body: formOf(form) });
  const response = await POST(request, at());
  return { status: response.status, body: (await response.json()) as Record<string, unknown> };
}

export type Row = { takenAt: string; medium: string; f0Hz: number; q: number; temperatureC?: number; cycle?: number };

/** Rows as CSV with the columns of the API. */
export const csvOf = (rows: readonly Row[]): string =>
  ["takenAt,medium,f0Hz,q,temperatureC,cycle", ...rows.map(({ takenAt, medium, f0Hz, q, temperatureC, cycle }) => [takenAt, medium, f0Hz, q, temperatureC ?? "", cycle ?? ""].join(","))].join("\n");

type Made = { cycles: number; repeats: number; begin?: string; spacingS?: number };

/** Cycles of air and water, an hour apart. */
export function aCampaign({ cycles, repeats, begin = "2026-03-02T08:00:00Z", spacingS = 10 }: Made): Row[] {
  return Array.from({ length: cycles * 2 }, (_, phase) => {
    const from = Date.parse(begin) + phase * (repeats * spacingS + 3600) * 1000;
    const air = phase % 2 === 0;
    return Array.from({ length: repeats }, (_, i) => ({
      takenAt: new Date(from + i * spacingS * 1000).toISOString(),
      medium: air ? "air" : "Water",
      f0Hz: (air ? 2400 : 2100) + Math.sin(7 * i + phase) * 1e-3 + phase * 1e-4,
      q: (air ? 1800 : 90) + Math.cos(3 * i) * 0.1,
      temperatureC: 20 + 0.01 * Math.sin(i),
      cycle: Math.floor(phase / 2) + 1,
    }));
  }).flat();
}
