import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { POST as finish } from "@/app/api/agent/steps/[id]/finish/route";
import { POST as readings } from "@/app/api/agent/steps/[id]/readings/route";
import { POST as next } from "@/app/api/agent/steps/next/route";
import { POST as heartbeat } from "@/app/api/agent/heartbeat/route";
import { POST as hello } from "@/app/api/agent/hello/route";

const byId = { readings, finish };

/** The application's own agent routes on a port of their own, without the rest of it. */
export async function serveAgentRoutes(): Promise<{ url: string; stop: () => Promise<void> }> {
  const server = createServer(async (incoming, outgoing) => {
    const chunks: Buffer[] = [];
    for await (const chunk of incoming) chunks.push(chunk as Buffer);
    const gone = new AbortController();
    outgoing.once("close", () => gone.abort());
    const path = incoming.url ?? "";
    const [, id, act] = /^\/api\/agent\/steps\/([^/]+)\/(readings|finish)$/.exec(path) ?? [];
    const request = new Request(`http://127.0.0.1${path}`, {
      method: "POST",
      headers: Object.entries(incoming.headers).map(([name, value]): [string, string] => [name, String(value)]),
      body: Buffer.concat(chunks),
      signal: gone.signal,
    });
    const handler = act ? byId[act as keyof typeof byId] : { "/api/agent/hello": hello, "/api/agent/heartbeat": heartbeat, "/api/agent/steps/next": next }[path];
    const answer = handler ? await handler(request, { params: Promise.resolve(id === undefined ? {} : { id }) }) : new Response(null, { status: 404 });
    outgoing.writeHead(answer.status, Object.fromEntries(answer.headers));
    outgoing.end(Buffer.from(await answer.arrayBuffer()));
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    stop: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}
