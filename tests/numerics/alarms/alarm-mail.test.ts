import { describe, expect, test } from "vitest";
import { renderAlarmMail, type AlarmMail } from "@/lib/notifications/alarm-mail";

const alarm: AlarmMail = {
  id: "12",
  kind: "step-pump",
  text: "South bench: could not fill Brine B-35: the level sensor stayed dry for 240 s",
  actionText: "The step was given up and the campaign holds.",
  openedAt: new Date("2026-05-14T04:18:00Z"),
  openedClock: new Date("2026-05-14T04:18:00Z"),
  rig: "South bench",
  timeZone: "Europe/Berlin",
  simulated: false,
  campaignId: "121",
  campaign: "Fork in brine",
  campaignState: "held",
  serial: "FK-0914",
  laboratory: "Harrowmere sensor laboratory",
  progress: { cycle: 4, cycles: 6, repeats: 600 },
  lastAir: { f0Hz: 1217.3302, f0U: 0.0014, q: 884, qU: 3 },
  strip: [
    { letter: "A", kind: "air", tint: 1 },
    { letter: "W", kind: "liquid", tint: 1 },
    { letter: "", kind: "halt", tint: 1 },
  ],
  recipients: ["J. Pellick", "M. Tollan", "K. Orme"],
  againAt: new Date("2026-05-14T08:18:00Z"),
  appUrl: "https://longreed.example",
};

describe("subject", () => {
  test.each([
    [{}, "South bench halted: could not fill Brine B-35"],
    [{ campaignState: "stopped" }, "South bench stopped: could not fill Brine B-35"],
    [{ campaignState: "running", kind: "drift", text: "WR-1 on South bench, cycle 9: f0 in air drifts" }, "South bench: drift beyond its limit"],
    [{ kind: "silence", campaignState: "running", text: "South bench: the rig agent was last heard" }, "South bench: rig agent silent"],
  ])("%o", (given, subject) => expect(renderAlarmMail({ ...alarm, ...given }).subject).toBe(subject));

  test("stays one short line whatever an agent says", () => {
    const { subject } = renderAlarmMail({ ...alarm, text: `South bench: could not fill ${"x".repeat(300)}\r\nBcc: someone@longreed.example` });
    expect(subject.length).toBeLessThanOrEqual(120);
    expect(subject).not.toMatch(/[\r\n]/);
  });
});

describe("both forms", () => {
  const { text, html } = renderAlarmMail(alarm);
  const forms = [
    ["plain text", text],
    ["HTML", html.replaceAll(/&nbsp;/g, " ")],
  ] as const;

  test.each(forms)("%s says what happened, since when, what was done, what to do, where, and who else knows", (_, form) => {
    for (const said of [
      "South bench could not fill Brine B-35",
      "halted Thu 14 May 06:18",
      "The level sensor stayed dry for 240 s.",
      "The step was given up and the campaign holds.",
      "What to do",
      "Go on",
      "campaign C-121, Fork in brine",
      "sensor FK-0914",
      "Cycle 4 of 6, 600 repeats kept.",
      "1\u2009217.330\u20092(14) Hz",
      "Sent to J. Pellick, M. Tollan and K. Orme.",
      "If nobody has it by 10:18, it is sent once more.",
      "no emergency stop",
      "https://longreed.example/alarms/12",
      "https://longreed.example/settings",
    ])
      expect(form).toContain(said);
  });

  test("the HTML is one table of at most 620 px without images or scripts, the run as letter cells", () => {
    expect(html).toContain("max-width:620px");
    expect(html).not.toMatch(/<img|<script|url\(/);
    expect(html).toMatch(/>W<\/td>/);
    expect(html).toContain("&#9670;</td>");
  });

  test("what an agent said cannot become markup", () => {
    const said = renderAlarmMail({ ...alarm, text: 'South bench: could not fill <b onload="x">: <script>1</script> & so on' }).html;
    expect(said).not.toContain("<script>");
    expect(said).not.toContain("<b onload");
    expect(said).toContain("&lt;script&gt;");
  });
});

test("a simulated rig's time is said to be its own", () => {
  const { text } = renderAlarmMail({ ...alarm, simulated: true, openedClock: new Date("2026-02-01T10:00:00Z") });
  expect(text).toContain("Sun 1 Feb 11:00 (the rig's simulated time)");
});

test("without a campaign it tells of the rig alone", () => {
  const { text } = renderAlarmMail({ ...alarm, kind: "clock", text: "South bench: the clock is off", campaignId: null, campaign: null, campaignState: null, serial: null, progress: null, lastAir: null, strip: [] });
  expect(text).toContain("Where: South bench\n");
  expect(text).not.toContain("repeats kept");
});
