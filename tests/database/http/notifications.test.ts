import { afterAll, beforeAll, expect, test } from "vitest";
import { POST } from "@/app/api/notifications/[id]/send-again/route";
import { GET } from "@/app/api/notifications/route";
import { sequelize } from "@/lib/db";
import type { NotificationAnswer } from "@/lib/notifications/schema";
import { Notification } from "@/models/notification";
import { auditedActions } from "../../factories/audit";
import { next, now } from "../../factories/now";
import { buildPerson } from "../../factories/person";
import { at, request, signedInAs } from "../../factories/session";

let cookie: string;
beforeAll(async () => void ({ cookie } = await signedInAs("administrator")));
afterAll(() => sequelize.close());

const SECRET = "https://longreed.example/new-password/lr_reset_secret";

async function mail(state: "waiting" | "sent" | "failed"): Promise<string> {
  const person = await buildPerson();
  const letter = { kind: `letter:${next()}`, address: person.email, subject: "A new password", bodyText: SECRET, bodyHtml: `<a href="${SECRET}">link</a>` };
  const { id } = await Notification.create({ ...letter, personId: person.id, state, tries: 3, error: state === "failed" ? "550 no such mailbox" : null, createdAt: now, sentAt: state === "sent" ? now : null });
  return id;
}

type Answer = { items: NotificationAnswer[]; nextCursor: string | null };

async function list(query = ""): Promise<Answer> {
  const response = await GET(request("GET", `/api/notifications${query}`, { cookie }), at());
  expect(response.status).toBe(200);
  const text = await response.text();
  expect(text).not.toContain("lr_reset_secret");
  return JSON.parse(text) as Answer;
}
const sendAgain = (id: string) => POST(request("POST", `/api/notifications/${id}/send-again`, { cookie }), at({ id }));

test("what could not be delivered is listed unless asked otherwise, the newest first, page by page, never its content", async () => {
  const failed = [await mail("failed"), await mail("failed"), await mail("failed")];
  const [waiting, sent] = [await mail("waiting"), await mail("sent")];
  const first = await list("?limit=2");
  expect(first.items.map(({ id }) => id)).toEqual([failed[2], failed[1]]);
  expect(first.items[0]).toMatchObject({ state: "failed", tries: 3, error: "550 no such mailbox", subject: "A new password", sentAt: null });
  const second = await list(`?limit=2&cursor=${first.nextCursor}`);
  expect(second).toMatchObject({ items: [{ id: failed[0] }], nextCursor: null });
  expect((await list("?state=waiting")).items.map(({ id }) => id)).toEqual([waiting]);
  expect((await list("?state=sent")).items).toMatchObject([{ id: sent, sentAt: now.toISOString() }]);
});

test("a failed mail waits again, once however often it is asked; a sent one stays sent", async () => {
  const id = await mail("failed");
  expect((await sendAgain(id)).status).toBe(200);
  expect((await sendAgain(id)).status).toBe(200);
  expect((await Notification.findByPk(id))?.state).toBe("waiting");
  expect(await auditedActions("notification", id)).toEqual(["send again"]);
  const sent = await mail("sent");
  expect((await sendAgain(sent)).status).toBe(409);
  expect((await Notification.findByPk(sent))?.state).toBe("sent");
  expect((await sendAgain("999999")).status).toBe(404);
});
