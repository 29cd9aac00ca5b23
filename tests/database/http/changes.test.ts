import { afterAll, expect, test } from "vitest";
import { GET } from "@/app/api/changes/route";
import { writeNote } from "@/lib/campaigns/notes";
import { inTransaction, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { notify } from "@/lib/notify";
import { buildCampaign } from "@/tests/factories/campaign";
import { actor } from "@/tests/factories/person";
import { ORIGIN, signedInAs } from "@/tests/factories/session";

afterAll(async () => {
  await listener().close();
  await sequelize.close();
});

const context = { params: Promise.resolve({}) };

async function follow(query = "") {
  const ending = new AbortController();
  const { cookie } = await signedInAs("viewer");
  const answer = await GET(new Request(`${ORIGIN}/api/changes${query}`, { headers: { cookie }, signal: ending.signal }), context);
  expect(answer.headers.get("content-type")).toBe("text/event-stream; charset=utf-8");
  const reader = (answer.body as ReadableStream<Uint8Array>).getReader();
  const decoder = new TextDecoder();
  let text = "";
  const names = async (): Promise<string[]> => {
    for (;;) {
      const found = /data: (.*)\n\n/.exec(text);
      if (found) {
        text = text.slice(found.index + found[0].length);
        return JSON.parse(found[1]) as string[];
      }
      const { done, value } = await reader.read();
      if (done) return [];
      text += decoder.decode(value, { stream: true });
    }
  };
  return { names, ending };
}

test("names what others commit, together what came together, and nothing that was rolled back or is not for pages", async () => {
  const { names, ending } = await follow();
  const campaign = await buildCampaign();
  await inTransaction(async (transaction) => {
    await notify("changed:rigs", transaction);
    throw new Error("rolled back");
  }).catch(() => undefined);
  await notify("rig:1");
  await writeNote({ by: await actor("operator"), campaignId: campaign.id, text: "The bench is quiet", now: new Date() });
  await notify("changed:alarms");
  const heard: string[] = [];
  while (!heard.includes("alarms")) heard.push(...(await names()));
  expect(heard.filter((name) => name !== "*")).toEqual([`campaign:${campaign.id}`, "alarms"]);
  ending.abort();
  expect(await names()).toEqual([]);
});

test("a reader who goes away leaves nothing behind that would be told on", async () => {
  const { cookie } = await signedInAs("viewer");
  const answer = await GET(new Request(`${ORIGIN}/api/changes`, { headers: { cookie } }), context);
  await answer.body?.cancel();
  await notify("changed:rigs");
  const { names } = await follow("?forS=1");
  expect((await names()).filter((name) => name !== "*" && name !== "rigs")).toEqual([]);
});

test("ends by itself after the time asked for, so that whoever may no longer sign in hears no more", async () => {
  const { names } = await follow("?forS=1");
  expect((await names()).filter((name) => name !== "*")).toEqual([]);
});
