"use client";

import { useRouter } from "next/navigation";
import { signIn } from "next-auth/react";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { firstPage } from "./landing";

type Props = {
  /** Where the choice goes. */
  action: "/api/invitations/accept" | "/api/password-resets/use";
  token: string;
  /** Signs in with it afterwards; without it the sign-in page follows. */
  email?: string;
  /** Asked for where the person is new. */
  name?: string;
  verb: string;
};

export function ChoosePasswordForm({ action, token, email, name, verb }: Props) {
  const router = useRouter();
  const [problem, setProblem] = useState<unknown>();
  const [busy, setBusy] = useState(false);
  const fault = (path: string) => (problem instanceof ProblemError ? problem.fields.find((field) => field.path === path)?.message : undefined);

  async function choose(given: FormData) {
    setBusy(true);
    setProblem(undefined);
    const password = String(given.get("password"));
    try {
      await fetchJson(action, { method: "POST", body: { token, password, ...(name !== undefined && { name: String(given.get("name")) }) } });
      if (email) await signIn("credentials", { email, password, redirect: false });
      router.replace(email ? await firstPage() : "/sign-in");
      router.refresh();
    } catch (error) {
      setProblem(error);
      setBusy(false);
    }
  }

  return (
    <div className="ways">
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (!busy) void choose(new FormData(event.currentTarget));
        }}
      >
        {email && <TextField label="E-mail" type="email" defaultValue={email} readOnly autoComplete="username" />}
        {name !== undefined && <TextField label="Name" name="name" defaultValue={name} autoComplete="name" required error={fault("name")} />}
        <TextField label="Password" name="password" type="password" autoComplete="new-password" minLength={12} maxLength={200} required hint="At least 12 characters" error={fault("password")} />
        <div className="buttons"><Button look="primary" type="submit" busy={busy}>{verb}</Button></div>
        {problem !== undefined && !fault("name") && !fault("password") && <Problem error={problem} />}
      </form>
    </div>
  );
}
