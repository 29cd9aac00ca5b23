import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { bringBackProtocol } from "@/lib/protocols/retire";

export const POST = route({
  permission: "edit protocols",
  summary: "Bring a retired protocol back",
  params: idParams,
  handle: ({ person, params, now }) => bringBackProtocol({ by: person, now, protocolId: params.id }),
});
