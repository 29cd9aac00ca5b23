import { AskForResetForm } from "./ask-for-reset-form";

export const metadata = { title: "Forgotten password" };

export default function ForgottenPasswordPage() {
  return (
    <main className="page-row" id="main">
      <div className="margin">The link is good for an hour.</div>
      <div className="body">
        <h1 className="say">A link to a new password comes by mail.</h1>
        <AskForResetForm />
      </div>
    </main>
  );
}
