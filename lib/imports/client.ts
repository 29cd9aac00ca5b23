import { queryOptions } from "@tanstack/react-query";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { importAnswer, importPage, importRunAnswer, type Format, type ImportAnswer, type ImportRunAnswer, type Mapping } from "@/lib/imports/schema";

export const importsOptions = () =>
  queryOptions({ queryKey: ["imports", "list"], queryFn: ({ signal }) => fetchJson("/api/imports?limit=20", { answer: importPage, signal }), refetchInterval: 10_000 });

export const isOpen = ({ state }: Pick<ImportRunAnswer, "state">): boolean => state === "receiving" || state === "waiting" || state === "running";

export const importRunOptions = (importRunId: string) =>
  queryOptions({
    queryKey: ["imports", "one", importRunId],
    queryFn: ({ signal }) => fetchJson(`/api/imports/${importRunId}`, { answer: importRunAnswer, signal }),
    refetchInterval: ({ state: { data } }) => (data && isOpen(data) ? 1000 : false),
  });

export type ToSend = { file: File; name: string; sensorId?: string; mapping: Mapping; format: Format };

/** Sends a file, telling how much of it has left. @throws ProblemError */
export function sendFile({ file, name, sensorId, mapping, format }: ToSend, onShare: (share: number) => void): Promise<ImportAnswer> {
  const form = new FormData();
  form.set("name", name);
  if (sensorId) form.set("sensorId", sensorId);
  form.set("mapping", JSON.stringify(mapping));
  form.set("format", JSON.stringify(format));
  form.set("file", file);
  // fetch does not tell how much has left.
  const request = new XMLHttpRequest();
  return new Promise((resolve, reject) => {
    request.upload.onprogress = ({ loaded, total }) => onShare(loaded / total);
    request.onerror = () => reject(new ProblemError("offline", 0, "No answer", "Longreed cannot be reached. Nothing was imported."));
    request.onload = () => {
      try {
        if (request.status < 300) resolve(importAnswer.parse(JSON.parse(request.responseText)));
        else reject(problemOf(request));
      } catch {
        reject(new ProblemError("unreadable", request.status, "The request failed", `The server answered ${request.status}.`));
      }
    };
    request.open("POST", "/api/imports");
    request.setRequestHeader("Accept", "application/json");
    request.send(form);
  });
}

function problemOf({ status, responseText }: XMLHttpRequest): ProblemError {
  const { type = "", title = "The request failed", detail = title, errors = [], ...members } = JSON.parse(responseText) as { type?: string; title?: string; detail?: string; errors?: { path: string; message: string }[] };
  return new ProblemError(type.split("/").at(-1) ?? type, status, title, detail, errors, members);
}
