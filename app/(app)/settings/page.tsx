import type { Metadata } from "next";
import Link from "next/link";
import { Hydrated } from "@/components/hydrated";
import { PageSentence, Section } from "@/components/ui/page";
import { ownTokensOptions } from "@/lib/people/client";
import { currentPerson } from "@/lib/people/current-person";
import { getMe } from "@/lib/people/me";
import { findTokens } from "@/lib/people/tokens";
import { may } from "@/lib/permissions";
import { LaboratoryForm } from "./laboratory-form";
import { MailChoices } from "./mail-choices";
import { NameForm } from "./name-form";
import { PaperChoice } from "./paper-choice";
import { PasswordForm } from "./password-form";
import { TokensPanel } from "./tokens-panel";

export const metadata: Metadata = { title: "Settings" };

export default async function SettingsPage() {
  const by = await currentPerson();
  const now = new Date();
  const [me, tokens] = await Promise.all([getMe({ by, now }), findTokens({ by, limit: 200 })]);
  return (
    <Hydrated data={[[ownTokensOptions().queryKey, tokens]]}>
      <PageSentence margin={<b className="text-ink">{me.email}</b>}>{me.name}, {me.role}.</PageSentence>
      <Section head="Name" note="As colleagues see it. Old records keep the name they were written with.">
        <NameForm name={me.name} />
      </Section>
      <Section head="Password" note="All sessions end with a change, this one too.">
        <PasswordForm email={me.email} />
      </Section>
      <Section head="Mail" note={<>Goes to {me.email}. Alarms and tasks stand on Today for everybody, whatever is chosen here.{may(by.role, "settings") && <> What the mail server refused is under <Link href="/settings/mail">undelivered mail</Link>.</>}</>}>
        <MailChoices wishes={me.notify} />
      </Section>
      <Section head="Paper" note="On this browser.">
        <PaperChoice />
      </Section>
      <Section head="Tokens for scripts" note={<>A script sends one as <code>Authorization: Bearer</code>. It may do what you may, or only read. Kept as a hash. What there is to call stands in the <Link href="/api-reference">API reference</Link>.</>}>
        <TokensPanel zone={me.laboratory.timeZone} now={me.serverTime} />
      </Section>
      {may(by.role, "settings") && (
        <Section head="Laboratory" note="For everybody. The clock over every page shows this zone; each rig keeps its own.">
          <LaboratoryForm laboratory={me.laboratory} timeZones={Intl.supportedValuesOf("timeZone")} />
        </Section>
      )}
    </Hydrated>
  );
}
