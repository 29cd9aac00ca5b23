import { PageSentence } from "@/components/ui/page";
import { whoMay, type Permission } from "@/lib/permissions";

/** Stands where a page would, for whoever may not open it. */
export function NotAllowed({ permission }: { permission: Permission }) {
  return <PageSentence>This page is for {whoMay(permission)}.</PageSentence>;
}
