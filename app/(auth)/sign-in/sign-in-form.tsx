"use client";

import Link from "next/link";
import { useRouter } from "next/navigation";
import { signIn } from "next-auth/react";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import type { DemoAccount } from "@/lib/people/demo-accounts";
import { firstPage } from "../landing";

type Props = { next: string; demo?: { password: string; accounts: readonly DemoAccount[] } };

export function SignInForm({ next, demo }: Props) {
  const router = useRouter();
  const [refusal, setRefusal] = useState<string>();
  const [busy, setBusy] = useState(false);

  async function enter(email: string, password: string) {
    setBusy(true);
    setRefusal(undefined);
    const refused = await refusalOf(email, password);
    if (refused) {
      setRefusal(refused);
      setBusy(false);
      return;
    }
    router.replace(await firstPage(next));
    router.refresh();
  }

  return (
    <div className="ways">
      <form
        onSubmit={(event) => {
          event.preventDefault();
          const given = new FormData(event.currentTarget);
          if (!busy) void enter(String(given.get("email")), String(given.get("password")));
        }}
      >
        <TextField label="E-mail" name="email" type="email" autoComplete="username" required />
        <TextField label="Password" name="password" type="password" autoComplete="current-password" required error={refusal} />
        <div className="buttons">
          <Button look="primary" type="submit" busy={busy}>Sign in</Button>
          <Link className="button link" href="/forgotten-password">Forgotten password</Link>
        </div>
        <p className="small text-ink2">New here? An administrator of your laboratory sends the invitation.</p>
      </form>
      {demo && demo.accounts.length > 0 && (
        <section className="demo-accounts" aria-label="Demo accounts">
          <p className="small text-ink2"><b className="text-ink">A demo laboratory.</b> Everybody’s password is <b className="text-ink">{demo.password}</b>.</p>
          <ul className="mt-2">
            {demo.accounts.map(({ email, name, role }) => (
              <li key={email}>
                <span><b>{name}</b>, {role}</span>
                <span className="small text-ink2">{email}</span>
                <Button small busy={busy} aria-label={`Sign in as ${name}`} onClick={() => void enter(email, demo.password)}>Sign in</Button>
              </li>
            ))}
          </ul>
        </section>
      )}
    </div>
  );
}

async function refusalOf(email: string, password: string): Promise<string | undefined> {
  const answer = await signIn("credentials", { email, password, redirect: false }).catch(() => undefined);
  if (!answer) return "Longreed cannot be reached. Try again in a moment.";
  if (answer.ok) return undefined;
  if (answer.status === 429) return "Too many tries. Wait a quarter of an hour, then try again.";
  if (answer.error === "CredentialsSignin") return "Address and password do not belong together.";
  return "Signing in does not work for the moment. Try again shortly.";
}
