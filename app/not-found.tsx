import { LinkButton } from "@/components/ui/button";
import { Page, PageSentence } from "@/components/ui/page";

export const metadata = { title: "No such page" };

export default function NotFound() {
  return (
    <Page bare>
      <PageSentence margin="404" actions={<LinkButton href="/" look="primary">Today</LinkButton>}>
        There is nothing at this address.
      </PageSentence>
    </Page>
  );
}
