import { afterAll, expect, test } from "vitest";
import { GET as GET_LOAD } from "@/app/api/loads/[id]/route";
import { GET as GET_RIG_TOKEN } from "@/app/api/rigs/[id]/tokens/[tokenId]/route";
import { GET as GET_TOKEN } from "@/app/api/tokens/[id]/route";
import { sequelize } from "@/lib/db";
import { AccessToken } from "@/models/access-token";
import { buildLoad } from "../../factories/load";
import { buildRig } from "../../factories/rig";
import { agentToken, at, request, signedInAs, tokenOf } from "../../factories/session";

afterAll(() => sequelize.close());

test("a load is read by everybody, with its rig", async () => {
  const rig = await buildRig();
  const load = await buildLoad({ rigId: rig.id, volumeMl: 400 });
  const { cookie } = await signedInAs("viewer");
  const response = await GET_LOAD(request("GET", "/", { cookie }), at({ id: load.id }));
  expect(await response.json()).toMatchObject({ id: load.id, rigId: rig.id, volumeMl: 400 });
  expect((await GET_LOAD(request("GET", "/", { cookie }), at({ id: "999999" }))).status).toBe(404);
});

test("a personal token is its person's own: another's is not found, an administrator's eye excepted; never the secret", async () => {
  const owner = await signedInAs("operator");
  const secret = await tokenOf(owner.person.id);
  const { id } = await AccessToken.findOne({ where: { personId: owner.person.id }, rejectOnEmpty: true });
  const statusFor = async (cookie: string) => (await GET_TOKEN(request("GET", "/", { cookie }), at({ id }))).status;
  expect(await statusFor((await signedInAs("researcher")).cookie)).toBe(404);
  expect(await statusFor((await signedInAs("administrator")).cookie)).toBe(200);
  const text = await (await GET_TOKEN(request("GET", "/", { cookie: owner.cookie }), at({ id }))).text();
  expect(JSON.parse(text)).toMatchObject({ id, scope: "write", last4: secret.slice(-4) });
  expect(text).not.toContain(secret);
});

test("a rig's token is read by an administrator, under its own rig only", async () => {
  const { rigId, tokenId } = await agentToken();
  const { cookie } = await signedInAs("administrator");
  expect((await GET_RIG_TOKEN(request("GET", "/", { cookie }), at({ id: rigId, tokenId }))).status).toBe(200);
  const other = await buildRig();
  expect((await GET_RIG_TOKEN(request("GET", "/", { cookie }), at({ id: other.id, tokenId }))).status).toBe(404);
  const researcher = await signedInAs("researcher");
  expect((await GET_RIG_TOKEN(request("GET", "/", { cookie: researcher.cookie }), at({ id: rigId, tokenId }))).status).toBe(403);
});
