import { LinkButton } from "@/components/ui/button";
import { PageRow, PageSentence } from "@/components/ui/page";
import { whoMay, type Permission } from "@/lib/permissions";

/** Stands where a page would, for whoever may not open it. */
export function NotAllowed({ permission }: { permission: Permission }) {
  return (
    <>
      <PageSentence actions={<LinkButton href="/" look="primary">Today</LinkButton>}>This page is for {whoMay(permission)}.</PageSentence>
      <PageRow className="mt-2">
        <p className="text-ink2">An administrator can give you another role; it holds at once, without signing in again.</p>
      </PageRow>
    </>
  );
}
