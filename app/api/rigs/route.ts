import { route } from "@/lib/http/route";
import { createRig } from "@/lib/rigs/create";
import { findRigs } from "@/lib/rigs/read";
import { rigBody, rigPage, rigQuery } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "Rigs by name, with what runs, the agent, ports and bottles",
  query: rigQuery,
  answer: rigPage,
  handle: ({ query }) => findRigs(query),
});

export const POST = route({
  permission: "edit rigs",
  summary: "Make a rig with its ports",
  body: rigBody,
  answer: created,
  status: 201,
  handle: ({ person, body, now }) => createRig({ by: person, now, ...body }),
});
