import { ChoosePasswordForm } from "../../choose-password-form";

export const metadata = { title: "New password", referrer: "no-referrer" };

export default async function NewPasswordPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  return (
    <main className="page-row" id="main">
      <div className="margin">Every session of the account ends, on all its devices.</div>
      <div className="body">
        <h1 className="say">Choose a new password.</h1>
        <ChoosePasswordForm action="/api/password-resets/use" token={token} verb="Set the password" />
      </div>
    </main>
  );
}
