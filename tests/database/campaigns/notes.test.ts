import { afterAll, describe, expect, test } from "vitest";
import { GET, POST } from "@/app/api/campaigns/[id]/notes/route";
import { findNotes, writeNote } from "@/lib/campaigns/notes";
import { sequelize } from "@/lib/db";
import { auditedActions } from "@/tests/factories/audit";
import { buildCampaign } from "@/tests/factories/campaign";
import { hours, now } from "@/tests/factories/now";
import { actor } from "@/tests/factories/person";
import { at, request, signedInAs } from "@/tests/factories/session";

afterAll(() => sequelize.close());

describe("team notes", () => {
  test("an operator writes one, everybody reads it with name and role, the audit log has it", async () => {
    const { id: campaignId } = await buildCampaign();
    const by = await actor("operator");
    await writeNote({ by, campaignId, text: "Window blind replaced", now });
    expect((await findNotes({ campaignId, query: { limit: 50 } })).items).toEqual([{ id: expect.any(String), text: "Window blind replaced", by: by.name, role: "operator", at: now.toISOString() }]);
    expect(await auditedActions("campaign", campaignId)).toContain("write note");
  });

  test("a viewer may read but not write", async () => {
    const { id } = await buildCampaign();
    const { cookie } = await signedInAs("viewer");
    expect((await POST(request("POST", `/api/campaigns/${id}/notes`, { cookie, body: { text: "no" } }), at({ id }))).status).toBe(403);
    expect((await GET(request("GET", `/api/campaigns/${id}/notes`, { cookie }), at({ id }))).status).toBe(200);
  });

  test("an empty note, a note of a campaign that is not there, and a caller that is not signed in are refused", async () => {
    const { id } = await buildCampaign();
    const { cookie } = await signedInAs("researcher");
    const post = (to: string, body: unknown, who?: string) => POST(request("POST", `/api/campaigns/${to}/notes`, { cookie: who, body }), at({ id: to }));
    expect((await post(id, { text: "   " }, cookie)).status).toBe(400);
    expect((await post("999999", { text: "where" }, cookie)).status).toBe(404);
    expect((await post(id, { text: "who" })).status).toBe(401);
  });

  test("pages go from the newest back and hold each note once", async () => {
    const { id: campaignId } = await buildCampaign();
    const by = await actor("researcher");
    for (let i = 0; i < 5; i++) await writeNote({ by, campaignId, text: `note ${i}`, now: hours(i) });
    const first = await findNotes({ campaignId, query: { limit: 3 } });
    const rest = await findNotes({ campaignId, query: { limit: 3, cursor: first.nextCursor ?? undefined } });
    expect([...first.items, ...rest.items].map(({ text }) => text)).toEqual(["note 4", "note 3", "note 2", "note 1", "note 0"]);
    expect(rest.nextCursor).toBeNull();
  });
});
