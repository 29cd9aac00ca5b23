import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { createAgentToken, findAgentTokens, revokeAgentToken } from "@/lib/rigs/tokens";
import { hashToken } from "@/lib/tokens";
import { AgentToken } from "@/models/agent-token";
import { auditedActions } from "../../factories/audit";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildRig } from "../../factories/rig";

afterAll(() => sequelize.close());

test("a token stands in the answer only: the database has its hash, the list its last four signs", async () => {
  const by = await actor("administrator");
  const rig = await buildRig();
  const { id, token } = await createAgentToken({ by, now, rigId: rig.id, name: "bench computer" });
  const stored = await AgentToken.findByPk(id, { rejectOnEmpty: true });
  expect(stored.tokenHash).toEqual(hashToken(token));
  const { items } = await findAgentTokens({ by, rigId: rig.id, limit: 50 });
  expect(items).toEqual([expect.objectContaining({ id, last4: token.slice(-4), createdBy: by.name, revokedAt: null })]);
  expect(JSON.stringify(items)).not.toContain(token);
  expect(await auditedActions("agentToken", id)).toEqual(["create token"]);
});

test("withdrawing is recorded once, however often it is asked", async () => {
  const by = await actor("administrator");
  const rig = await buildRig();
  const { id } = await createAgentToken({ by, now, rigId: rig.id, name: "bench computer" });
  await revokeAgentToken({ by, now, rigId: rig.id, tokenId: id });
  await revokeAgentToken({ by, now, rigId: rig.id, tokenId: id });
  expect((await AgentToken.findByPk(id))?.revokedAt).toEqual(now);
  expect(await auditedActions("agentToken", id)).toEqual(["create token", "withdraw token"]);
});

test("a token of another rig is not found", async () => {
  const by = await actor("administrator");
  const { id } = await createAgentToken({ by, now, rigId: (await buildRig()).id, name: "one" });
  await expect(revokeAgentToken({ by, now, rigId: (await buildRig()).id, tokenId: id })).rejects.toMatchObject({ status: 404 });
});

test("a retired rig gets no token", async () => {
  const rig = await buildRig({ retiredAt: now });
  await expect(createAgentToken({ by: await actor("administrator"), now, rigId: rig.id, name: "one" })).rejects.toMatchObject({ status: 409 });
});

test("a researcher may neither make nor list nor withdraw tokens", async () => {
  const by = await actor("researcher");
  const rig = await buildRig();
  await expect(createAgentToken({ by, now, rigId: rig.id, name: "one" })).rejects.toMatchObject({ status: 403 });
  await expect(revokeAgentToken({ by, now, rigId: rig.id, tokenId: "1" })).rejects.toMatchObject({ status: 403 });
  await expect(findAgentTokens({ by, rigId: rig.id, limit: 1 })).rejects.toMatchObject({ status: 403 });
});
