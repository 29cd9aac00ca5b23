"use client";

import Link from "next/link";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";

export function AskForResetForm() {
  const [state, setState] = useState<{ at: "asking" | "sending" | "sent" } | { at: "refused"; error: unknown }>({ at: "asking" });

  async function ask(email: string) {
    setState({ at: "sending" });
    try {
      await fetchJson("/api/password-resets", { method: "POST", body: { email } });
      setState({ at: "sent" });
    } catch (error) {
      setState({ at: "refused", error });
    }
  }

  if (state.at === "sent") {
    return <p className="say-small mt-5" role="status">If somebody here has this address, the mail is on its way.</p>;
  }
  return (
    <div className="ways">
      <form
        onSubmit={(event) => {
          event.preventDefault();
          if (state.at !== "sending") void ask(String(new FormData(event.currentTarget).get("email")));
        }}
      >
        <TextField label="E-mail" name="email" type="email" autoComplete="username" required />
        <div className="buttons">
          <Button look="primary" type="submit" busy={state.at === "sending"}>Send the link</Button>
          <Link className="button link" href="/sign-in">Back to sign-in</Link>
        </div>
        {state.at === "refused" && <Problem error={state.error} />}
      </form>
    </div>
  );
}
