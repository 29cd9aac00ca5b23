import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { addVersion } from "@/lib/protocols/add-version";
import { findVersions } from "@/lib/protocols/read";
import { protocolCreated, versionBody, versionPage } from "@/lib/protocols/schema";

export const GET = route({
  permission: "read",
  summary: "Versions of a protocol, newest first",
  params: idParams,
  query: pageQuery,
  answer: versionPage,
  handle: ({ params, query }) => findVersions({ protocolId: params.id, ...query }),
});

export const POST = route({
  permission: "edit protocols",
  summary: "Save the next version of a protocol",
  description: "Earlier versions stay as they are. Keep the ids of blocks and limits, so that a held campaign can move to the new version.",
  params: idParams,
  body: versionBody,
  answer: protocolCreated,
  status: 201,
  handle: ({ person, params, body, now }) => addVersion({ by: person, now, protocolId: params.id, ...body }),
});
