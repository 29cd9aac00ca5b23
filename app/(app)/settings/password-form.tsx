"use client";

import { useMutation } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { signIn } from "next-auth/react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";

type Change = { current: string; password: string };

/** The change ends this session as well, so the browser signs in again with the new password at once. */
export function PasswordForm({ email }: { email: string }) {
  const router = useRouter();
  const change = useMutation({
    async mutationFn(body: Change) {
      await fetchJson("/api/me/password", { method: "POST", body });
      const again = await signIn("credentials", { email, password: body.password, redirect: false });
      if (!again?.ok) router.replace("/sign-in");
    },
  });
  const fields = change.error instanceof ProblemError ? change.error.fields : [];
  const fault = (path: keyof Change) => fields.find((field) => field.path === path)?.message;
  return (
    <form
      className="grid max-w-90 gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        const form = event.currentTarget;
        const given = new FormData(form);
        change.mutate({ current: String(given.get("current")), password: String(given.get("password")) }, { onSuccess: () => form.reset() });
      }}
    >
      <input type="hidden" name="username" autoComplete="username" value={email} readOnly />
      <TextField label="Present password" name="current" type="password" autoComplete="current-password" required error={fault("current")} />
      <TextField label="New password" name="password" type="password" autoComplete="new-password" required minLength={12} maxLength={200} hint="At least 12 characters" error={fault("password")} />
      {change.error && fields.length === 0 && <Problem error={change.error} />}
      <div className="buttons">
        <Button type="submit" busy={change.isPending}>Change the password</Button>
        <span className="small text-ink2" role="status">{change.isSuccess && "Changed; all other sessions have ended"}</span>
      </div>
    </form>
  );
}
