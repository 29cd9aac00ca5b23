import type { FieldValues, Path, UseFormSetError } from "react-hook-form";

type Refusal = { message: string; fields?: readonly { path: string; message: string }[] };

/** Puts what the server refused at the fields that it names, and the rest over the form's verb. */
export function showProblem<Values extends FieldValues>(error: Error & Refusal, setError: UseFormSetError<Values>): void {
  for (const { path, message } of error.fields ?? []) if (path) setError(path as Path<Values>, { type: "server", message });
  setError("root", { type: "server", message: error.message });
}
