import type { Transaction } from "sequelize";
import { frame } from "@/lib/mail/frame";
import { notify } from "@/lib/notify";
import { Notification } from "@/models/notification";

type Letter = {
  now: Date;
  /** Whom it concerns or who caused it. */
  personId: string;
  address: string;
  /** Unique for the person: one letter of each kind is ever written. */
  kind: string;
  subject: string;
  sentence: string;
  foot: string;
  button: { label: string; link: string };
};

/** Puts a letter about an account into the outbox, in the transaction of what it tells of. */
export async function writeLetter(transaction: Transaction, { now, personId, address, kind, subject, sentence, foot, button }: Letter): Promise<void> {
  await Notification.create(
    {
      personId,
      address,
      kind,
      subject,
      bodyText: `${sentence}\n\n${button.label}: ${button.link}\n\n${foot}\n`,
      bodyHtml: frame({ title: subject, sentence, facts: [], button, foot }),
      state: "waiting",
      createdAt: now,
    },
    { transaction },
  );
  await notify("mail", transaction);
}
