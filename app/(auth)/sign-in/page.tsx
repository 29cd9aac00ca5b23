import { redirect } from "next/navigation";
import { personOrNull } from "@/lib/people/current-person";
import { findDemoAccounts } from "@/lib/people/demo-accounts";
import { readLaboratory } from "@/lib/laboratory";
import { ownPath } from "./own-path";
import { RingDown } from "./ring-down";
import { SignInForm } from "./sign-in-form";

export const metadata = { title: "Sign in" };

export default async function SignInPage({ searchParams }: { searchParams: Promise<Record<string, string | string[] | undefined>> }) {
  const next = ownPath((await searchParams).next);
  if (await personOrNull()) redirect(next);
  const [laboratory, demo] = await Promise.all([readLaboratory(), findDemoAccounts()]);
  return (
    <>
      <main className="page-row" id="main">
        <div className="margin"><b className="text-ink">{laboratory.name}</b></div>
        <div className="body">
          <h1 className="say">Weeks of unattended measurement, and a number you can stand behind.</h1>
          <SignInForm next={next} demo={demo} />
        </div>
      </main>
      <aside className="page-row ring-down" aria-label="How a wire rings down">
        <div className="margin">A tungsten wire of 0.1&nbsp;mm and 1&nbsp;kHz let go in air, in water, and in an oil of 8&nbsp;mPa·s.</div>
        <div className="body"><RingDown /></div>
      </aside>
    </>
  );
}
