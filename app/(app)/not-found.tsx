import { LinkButton } from "@/components/ui/button";
import { PageRow, PageSentence } from "@/components/ui/page";

export const metadata = { title: "Nothing here" };

export default function NotFoundInApp() {
  return (
    <>
      <PageSentence margin="404" actions={<LinkButton href="/find" look="primary">Find</LinkButton>}>There is nothing at this address.</PageSentence>
      <PageRow className="mt-2">
        <p className="text-ink2">The number may be mistyped, or the thing was a draft and has been deleted. Nothing that was measured is ever removed; Find looks by name, number, lot and serial number.</p>
      </PageRow>
    </>
  );
}
