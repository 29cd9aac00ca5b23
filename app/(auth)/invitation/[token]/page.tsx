import { LinkButton } from "@/components/ui/button";
import { PageSentence } from "@/components/ui/page";
import { AppError } from "@/lib/errors";
import { readInvitation } from "@/lib/people/accept-invitation";
import { ChoosePasswordForm } from "../../choose-password-form";

export const metadata = { title: "Invitation", referrer: "no-referrer" };

export default async function InvitationPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  const invitation = await readInvitation({ now: new Date(), token }).catch(asRefusal);
  if (invitation instanceof AppError) {
    return (
      <main id="main">
        <PageSentence actions={<LinkButton href="/sign-in" look="primary">Sign in</LinkButton>}>{invitation.message}.</PageSentence>
      </main>
    );
  }
  return (
    <main className="page-row" id="main">
      <div className="margin">You will read and work as <b className="text-ink">{invitation.role}</b>.</div>
      <div className="body">
        <h1 className="say">Welcome to Longreed. A password, and you are in.</h1>
        <ChoosePasswordForm action="/api/invitations/accept" token={token} email={invitation.email} name={invitation.name} verb="Accept the invitation" />
      </div>
    </main>
  );
}

function asRefusal(error: unknown): AppError {
  if (error instanceof AppError) return error;
  throw error;
}
