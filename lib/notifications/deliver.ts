import { inTransaction, row, rows, change } from "@/lib/db";
import { env } from "@/lib/env";
import { transport } from "@/lib/mail/transport";

type Waiting = { id: string; address: string; subject: string; bodyText: string; bodyHtml: string };

/** Notifications that wait for the mail server, oldest first. */
export async function findWaiting(): Promise<string[]> {
  return (await rows<{ id: string }>(`select id from notification where state = 'waiting' order by id limit 500`)).map(({ id }) => id);
}

/**
 * Sends one notification. Its row is locked meanwhile, so that two workers never send the same; the Message-ID is made of the
 * row's id, so that a mail server can tell a repetition after a crash between sending and noting it.
 *
 * @throws what the mail server said; the row keeps it and waits for the next try.
 */
export async function deliver({ notificationId, now }: { notificationId: string; now: Date }): Promise<void> {
  const failure = await inTransaction(async (transaction) => {
    const mail = await row<Waiting>(
      `select id, address, subject, body_text as "bodyText", body_html as "bodyHtml" from notification
        where id = $1 and state = 'waiting' for update skip locked`,
      [notificationId],
      transaction,
    );
    if (!mail) return undefined;
    try {
      await transport().sendMail({
        from: env().MAIL_FROM,
        to: mail.address,
        subject: mail.subject,
        text: mail.bodyText,
        html: mail.bodyHtml,
        messageId: `<notification-${mail.id}@${new URL(env().APP_URL).hostname}>`,
      });
    } catch (error) {
      await change(
        `update notification set tries = tries + 1, error = $2 where id = $1`,
        [mail.id, error instanceof Error ? error.message : String(error)],
        transaction,
      );
      return error;
    }
    await change(`update notification set state = 'sent', tries = tries + 1, sent_at = $2, error = null where id = $1`, [mail.id, now], transaction);
    return undefined;
  });
  if (failure !== undefined) throw failure;
}

/** After the last try: shown to the administrator, sent again only by hand. */
export async function giveUpOn({ notificationId }: { notificationId: string }): Promise<void> {
  await change(`update notification set state = 'failed' where id = $1 and state = 'waiting'`, [notificationId]);
}
