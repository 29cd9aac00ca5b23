import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { retireProtocol } from "@/lib/protocols/retire";

export const POST = route({
  permission: "edit protocols",
  summary: "Take a protocol out of the lists to choose from",
  params: idParams,
  handle: ({ person, params, now }) => retireProtocol({ by: person, now, protocolId: params.id }),
});
