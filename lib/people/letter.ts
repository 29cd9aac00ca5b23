import type { Transaction } from "sequelize";
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
  sentences: readonly string[];
  button: { label: string; link: string };
};

/** Puts a letter about an account into the outbox, in the transaction of what it tells of. */
export async function writeLetter(transaction: Transaction, { now, personId, address, kind, subject, sentences, button }: Letter): Promise<void> {
  const paragraphs = sentences.map((sentence) => `<p style="margin:0 0 12px">${escape(sentence)}</p>`).join("");
  await Notification.create(
    {
      personId,
      address,
      kind,
      subject,
      bodyText: [...sentences, `${button.label}: ${button.link}`].join("\n\n") + "\n",
      bodyHtml: `<table role="presentation" style="max-width:620px;font:16px/24px sans-serif;color:#12262e"><tr><td>${paragraphs}<p><a href="${escape(button.link)}" style="color:#12262e;font-weight:600">${escape(button.label)}</a></p></td></tr></table>`,
      state: "waiting",
      createdAt: now,
    },
    { transaction },
  );
  await notify("mail", transaction);
}

const escape = (text: string) => text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
