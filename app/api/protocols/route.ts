import { route } from "@/lib/http/route";
import { createProtocol } from "@/lib/protocols/create";
import { findProtocols } from "@/lib/protocols/read";
import { protocolBody, protocolCreated, protocolPage, protocolQuery } from "@/lib/protocols/schema";

export const GET = route({
  permission: "read",
  summary: "Protocols, with versions, campaigns and what the newest version takes",
  query: protocolQuery,
  answer: protocolPage,
  handle: ({ query, now }) => findProtocols({ ...query, now }),
});

export const POST = route({
  permission: "edit protocols",
  summary: "Save a protocol with its first version",
  description: "Ids of blocks and limits are made when absent. A definition that breaks a rule is 400 and names each place.",
  body: protocolBody,
  answer: protocolCreated,
  status: 201,
  handle: ({ person, body, now }) => createProtocol({ by: person, now, ...body }),
});
