import { setTimeout } from "node:timers/promises";
import { change, row, rows } from "@/lib/db";
import { createToken } from "@/lib/people/tokens";
import type { Actor } from "@/lib/people/actor";
import { fillCampaign } from "../lib/bench-campaign";
import { startBenchLaboratory } from "../lib/bench-laboratory";
import { childrenOf, megabytesOf } from "../lib/memory";
import type { BenchResult } from "./fits";

const SMALL = 10_000;
const LARGE = 1_000_000;
const PHASES = 500;
const POINTS = 800;
const ROUNDS = 15;
/** From the small to the large campaign the page's data may take so many times as long. */
const GROWTH_ALLOWED = 3;

const ask = `medium=air&points=${POINTS}`;
/** What the page of a campaign asks for, of all its repeats. */
const QUESTIONS = {
  campaign: "",
  strip: "/strip",
  phases: "/phases?limit=200",
  "series of f0": `/series?${ask}&quantity=f0`,
  "series of Q": `/series?${ask}&quantity=q`,
  "series of temperature": `/series?${ask}&quantity=temperature`,
  "stability within phases": "/stability?medium=air&view=within",
  "stability from phase to phase": "/stability?medium=air&view=phases",
  drift: "/drift?medium=air",
  "back to air": "/back-to-air",
} as const;

/** The data of one campaign's page over HTTP, from the built web application, with 10 000 repeats and with a million in as many phases. */
export async function run(): Promise<BenchResult[]> {
  const undoing: (() => Promise<void> | void)[] = [];
  try {
    const { url, pids } = await startBenchLaboratory({ repeats: 20, points: 51 }, (undo) => undoing.push(undo));
    const now = new Date();
    const by = await row<Actor>(`select id, name, role from person order by id limit 1`);
    const like = await row<{ id: string }>(`select id from campaign order by id limit 1`);
    if (!by || !like) throw new Error("the bench has no person or no campaign");
    const { token } = await createToken({ by, now, name: "bench", scope: "read" });
    const get = async (path: string) => {
      const answer = await fetch(`${url}/api/${path}`, { headers: { authorization: `Bearer ${token}` } });
      if (!answer.ok) throw new Error(`${path}: ${answer.status} ${await answer.text()}`);
      await answer.arrayBuffer();
    };
    const small = await fillCampaign({ like: like.id, repeats: SMALL, phases: PHASES, now });
    const large = await fillCampaign({ like: like.id, repeats: LARGE, phases: PHASES, now });
    await change(`vacuum analyze phase, phase_summary, phase_level, reading, fit, step`);

    const page = (campaignId: string) => Promise.all(Object.values(QUESTIONS).map((path) => get(`campaigns/${campaignId}${path}`)));
    const smallPage = await timed(() => page(small.campaignId));
    const cold = await timeOnce(() => page(large.campaignId));
    const largePage = await timed(() => page(large.campaignId));
    const single: BenchResult[] = [];
    for (const [name, path] of Object.entries(QUESTIONS)) single.push({ name: `  ${name}`, value: round(await timed(() => get(`campaigns/${large.campaignId}${path}`))), unit: "ms" });
    const again = await timeAgain({ get, campaignId: large.campaignId });
    const reading = await timed(() => rows(`select idx, f0_hz, q from fit where fit_run_id = $1`, [large.fitRunId]), 3);
    const [web, worker] = [pids.get("web") ?? 0, pids.get("worker") ?? 0];
    return [
      { name: "reading a million rows through the driver", value: round(reading), unit: "ms" },
      { name: "page data, 10 000 repeats", value: round(smallPage), unit: "ms" },
      { name: "page data, 1 000 000 repeats", value: round(largePage), unit: "ms", ratio: reading / largePage },
      { name: "page data, growth", value: Number((largePage / smallPage).toFixed(2)), unit: "times", ratio: (GROWTH_ALLOWED * smallPage) / largePage },
      ...single,
      { name: "page data, 1 000 000 repeats, first time", value: round(cold), unit: "ms", ratio: reading / cold },
      { name: "stability and drift computed anew", value: round(again.computing), unit: "ms", ratio: reading / again.computing },
      { name: "  longest wait for a small answer meanwhile", value: round(again.longestWait), unit: "ms" },
      { name: "memory of the web process", value: megabytesOf(web), unit: "MB" },
      { name: "memory of its process for heavy computations", value: childrenOf(web).reduce((sum, pid) => sum + megabytesOf(pid), 0), unit: "MB" },
      { name: "memory of the worker", value: megabytesOf(worker), unit: "MB" },
    ];
  } finally {
    for (const undo of undoing.reverse()) await undo();
  }
}

const round = (ms: number) => Number(ms.toPrecision(3));

async function timeOnce(work: () => Promise<unknown>): Promise<number> {
  const begun = performance.now();
  await work();
  return performance.now() - begun;
}

/** Median of several times, after one that does not count. */
async function timed(work: () => Promise<unknown>, rounds = ROUNDS): Promise<number> {
  await work();
  const times: number[] = [];
  for (let i = 0; i < rounds; i++) times.push(await timeOnce(work));
  return times.sort((a, b) => a - b)[Math.floor(rounds / 2)];
}

/** The heavy questions without their stored answers, and how long a small request has to wait for its answer while they are computed. */
async function timeAgain({ get, campaignId }: { get: (path: string) => Promise<void>; campaignId: string }): Promise<{ computing: number; longestWait: number }> {
  await change(`delete from analysis_result`);
  let longestWait = 0;
  let done = false;
  const small = async () => {
    while (!done) {
      longestWait = Math.max(longestWait, await timeOnce(() => get("me")));
      await setTimeout(5);
    }
  };
  const waiting = small();
  const computing = await timeOnce(() => Promise.all(["stability within phases", "drift"].map((name) => get(`campaigns/${campaignId}${QUESTIONS[name as keyof typeof QUESTIONS]}`))));
  done = true;
  await waiting;
  return { computing, longestWait };
}
