import { describe, expect, test } from "vitest";
import { Outbox, type KeptAnswer, type Shelf } from "@/lib/tasks/outbox";

class Device implements Shelf {
  private readonly texts = new Map<string, string>();
  getItem = (name: string) => this.texts.get(name) ?? null;
  setItem = (name: string, text: string) => void this.texts.set(name, text);
}

const offline = { status: 0, code: "offline", message: "Longreed cannot be reached." };

/** A server that can be cut off, and knows an Idempotency-Key again. */
class Server {
  isUp = true;
  loseAnswers = false;
  refuse: { status: number; code: string; message: string } | undefined;
  readonly took: string[] = [];
  take = (answer: KeptAnswer): Promise<void> => {
    if (!this.isUp) return Promise.reject(offline);
    if (this.refuse) return Promise.reject(this.refuse);
    if (!this.took.includes(answer.key)) this.took.push(answer.key);
    return this.loseAnswers ? Promise.reject(offline) : Promise.resolve();
  };
}

const answerTo = (taskId: string, key = `key of ${taskId}`) => ({
  key,
  taskId,
  path: `/api/tasks/${taskId}/answer`,
  body: { answer: "done" },
  verb: "Done",
  title: "Empty the waste, Loft bench",
  timeZone: "Europe/Berlin",
  at: "2026-05-14T07:38:00Z",
});

function setUp(device = new Device(), server = new Server(), personId = "4") {
  return { device, server, outbox: new Outbox({ personId, shelf: device, send: server.take }) };
}

describe("an answer", () => {
  test("goes out at once and is not kept any longer", async () => {
    const { outbox, server } = setUp();
    await outbox.give(answerTo("1"));
    expect(server.took).toEqual(["key of 1"]);
    expect(outbox.items()).toEqual([]);
  });

  test("waits while nothing answers, and goes out in the order given when something does", async () => {
    const { outbox, server } = setUp();
    server.isUp = false;
    await outbox.give(answerTo("1"));
    await outbox.give(answerTo("2"));
    expect(outbox.items().map(({ taskId }) => taskId)).toEqual(["1", "2"]);
    expect(outbox.items()[0].tries).toBeGreaterThan(0);
    server.isUp = true;
    await outbox.sendAll();
    expect(server.took).toEqual(["key of 1", "key of 2"]);
    expect(outbox.items()).toEqual([]);
  });

  test("outlives the page: another outbox of the same person on the same device sends it", async () => {
    const { device, server, outbox } = setUp();
    server.isUp = false;
    await outbox.give(answerTo("1"));
    server.isUp = true;
    const reopened = setUp(device, server).outbox;
    expect(reopened.items()).toHaveLength(1);
    await reopened.sendAll();
    expect(server.took).toEqual(["key of 1"]);
    expect(setUp(device, server).outbox.items()).toEqual([]);
  });

  test("is nobody else's on the same device", async () => {
    const { device, server, outbox } = setUp();
    server.isUp = false;
    await outbox.give(answerTo("1"));
    server.isUp = true;
    const other = setUp(device, server, "5").outbox;
    await other.sendAll();
    expect(other.items()).toEqual([]);
    expect(server.took).toEqual([]);
  });

  test("whose acknowledgement was lost is sent again under its key, and counts once", async () => {
    const { outbox, server } = setUp();
    server.loseAnswers = true;
    await outbox.give(answerTo("1"));
    expect(outbox.items()).toHaveLength(1);
    server.loseAnswers = false;
    await outbox.sendAll();
    expect(server.took).toEqual(["key of 1"]);
  });

  test("can be taken back until it is out", async () => {
    const { outbox, server } = setUp();
    server.isUp = false;
    await outbox.give(answerTo("1"));
    outbox.takeBack("key of 1");
    server.isUp = true;
    await outbox.sendAll();
    expect(server.took).toEqual([]);
  });

  test("that is refused stays with the reason, holds up nothing behind it and gives way to a new one", async () => {
    const { outbox, server } = setUp();
    server.refuse = { status: 409, code: "answered-already", message: "J. Pellick answered “done”; that answer stands" };
    await outbox.give(answerTo("1"));
    expect(outbox.items()).toMatchObject([{ taskId: "1", refusal: "J. Pellick answered “done”; that answer stands" }]);
    server.refuse = undefined;
    await outbox.give(answerTo("2"));
    expect(server.took).toEqual(["key of 2"]);
    await outbox.give(answerTo("1", "another key"));
    expect(server.took).toEqual(["key of 2", "another key"]);
    expect(outbox.items()).toEqual([]);
  });

  test.each([
    [401, "not-signed-in"],
    [409, "in-progress"],
    [429, "too-many"],
    [503, "unavailable"],
  ])("waits on after %i %s", async (status, code) => {
    const { outbox, server } = setUp();
    server.refuse = { status, code, message: "not now" };
    await outbox.give(answerTo("1"));
    expect(outbox.items()).toMatchObject([{ taskId: "1", tries: 1 }]);
    expect(outbox.items()[0].refusal).toBeUndefined();
  });
});

test("a second call to send joins the one at work, and an answer given meanwhile goes out with it", async () => {
  const started: string[] = [];
  let arrive = () => {};
  const arrived = new Promise<void>((resolve) => (arrive = resolve));
  const outbox = new Outbox({ personId: "4", shelf: new Device(), send: ({ key }) => (started.push(key), arrived) });
  const sending = outbox.give(answerTo("1"));
  expect(outbox.sendAll()).toBe(outbox.sendAll());
  void outbox.give(answerTo("2"));
  expect(started).toEqual(["key of 1"]);
  arrive();
  await sending;
  expect(started).toEqual(["key of 1", "key of 2"]);
  expect(outbox.items()).toEqual([]);
});

test("listeners hear of every change, and the list is the same object until then", async () => {
  const { outbox, server } = setUp();
  server.isUp = false;
  const heard: number[] = [];
  const leave = outbox.subscribe(() => heard.push(outbox.items().length));
  expect(outbox.items()).toBe(outbox.items());
  await outbox.give(answerTo("1"));
  leave();
  outbox.takeBack("key of 1");
  expect(heard).toEqual([1, 1]);
});

test("what cannot be read on the device is taken for nothing", () => {
  const { device, outbox } = setUp();
  for (const text of ["", "null", "{", '[{"key":"1"}]', '[{"path":"https://elsewhere.example/api/"}]']) {
    device.setItem("longreed answers 4", text);
    expect(outbox.items(), text).toEqual([]);
  }
});
