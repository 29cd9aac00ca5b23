import "server-only";
import { notFound } from "next/navigation";
import { AppError } from "@/lib/errors";

/** For pages: what does not exist shows the page that says so. */
export async function orNotFound<T>(found: Promise<T>): Promise<T> {
  try {
    return await found;
  } catch (error) {
    if (error instanceof AppError && error.status === 404) notFound();
    throw error;
  }
}
