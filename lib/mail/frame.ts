/** One stretch of a campaign as a cell of a table, for mail without images. */
export type StripCell = { letter: string; kind: "air" | "liquid" | "halt"; tint: 1 | 2 | 3 };

type Frame = {
  title: string;
  /** After "Longreed" in the head: "at Harrowmere sensor laboratory". */
  from?: string;
  /** A line over the sentence, on the alarm colour: "South bench, halted Thu 14 May 06:18". */
  alarm?: string;
  sentence: string;
  paragraphs?: readonly string[];
  todo?: readonly string[];
  facts: readonly (readonly [string, string])[];
  button: { label: string; link: string };
  strip?: readonly StripCell[];
  /** Under the strip. */
  note?: string;
  foot: string;
  /** A last, quiet link. */
  settings?: { label: string; link: string };
};

const FONT = "'Encode Sans','Segoe UI',Helvetica,Arial,sans-serif";
const DARK = `@media (prefers-color-scheme:dark){.bg{background:#0C1418 !important}.card{background:#131D22 !important;border-color:#3D525B !important}.ink,.ink a{color:#DFE9E4 !important}.ink2,.ink2 a{color:#AEBEBD !important}.alarm{background:#A33812 !important}.go{background:#DFE9E4 !important;color:#0C1418 !important}.rule{border-color:#22323A !important}}
@media (max-width:620px){.wrap{padding:0 !important}.card{border-width:0 !important}.pad{padding-left:18px !important;padding-right:18px !important}.go{display:block !important;text-align:center}}`;

/** A mail's HTML: one table of at most 620 px, inline styles, no images; dark where the reader's mail program is. */
export function frame({ title, from, alarm, sentence, paragraphs = [], todo = [], facts, button, strip = [], note, foot, settings }: Frame): string {
  const head = `<b class="ink" style="color:#12262E;font-size:15px">Longreed</b>${from ? ` &nbsp;${escapeHtml(from)}` : ""}`;
  const rows = [
    row("ink2", "padding:16px 28px;font-size:13px;line-height:18px;color:#3E5157", head),
    alarm ? alarmBand(alarm, sentence) : row("ink", "padding:18px 28px 8px;font:24px/31px Georgia,serif;color:#12262E", escapeHtml(sentence)),
    ...paragraphs.map((text) => row("ink", "padding:14px 28px 2px;font-size:16px;line-height:24px", escapeHtml(text))),
    facts.length > 0 ? row("ink", "padding:10px 28px 2px;font-size:14px;line-height:21px", factTable(facts)) : "",
    todo.length > 0 ? row("ink", "padding:12px 28px 2px;font-size:16px;line-height:24px", todoList(todo)) : "",
    row("", "padding:18px 28px 22px", buttonLink(button)),
    strip.length > 0 ? row("", "padding:0 28px 6px", stripTable(strip)) : "",
    note ? row("ink2", "padding:6px 28px 18px;font-size:13px;line-height:19px;color:#3E5157", escapeHtml(note)) : "",
    row("ink2 rule", "padding:14px 28px 18px;border-top:1px solid #CDD8CD;font-size:13px;line-height:19px;color:#3E5157", `${escapeHtml(foot)}${settings ? ` ${quietLink(settings)}` : ""}`),
  ];
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><meta name="color-scheme" content="light dark"><title>${escapeHtml(title)}</title><style>${DARK}</style></head>
<body class="bg" style="margin:0;background:#EFF3EC;font-family:${FONT}"><table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr><td class="wrap" align="center" style="padding:36px 16px">
<table role="presentation" class="card" width="100%" cellpadding="0" cellspacing="0" style="max-width:620px;background:#F9FBF7;border:1px solid #A3B3A8;color:#12262E;text-align:left">
${rows.filter(Boolean).join("\n")}
</table></td></tr></table></body></html>`;
}

const row = (classes: string, style: string, html: string) => `<tr><td class="pad ${classes}" style="${style}">${html}</td></tr>`;

const alarmBand = (line: string, sentence: string) =>
  `<tr><td class="alarm pad" style="background:#B3300A;color:#FFF8F4;padding:18px 28px 20px"><div style="font-size:14px;line-height:20px">&#9670;&nbsp; ${escapeHtml(line)}</div>` +
  `<div style="font-size:25px;line-height:31px;font-weight:600;padding-top:4px">${escapeHtml(sentence)}</div></td></tr>`;

const factTable = (facts: Frame["facts"]) =>
  `<table role="presentation" cellpadding="0" cellspacing="0">${facts
    .map(([name, value]) => `<tr><td class="ink2" style="padding:2px 16px 2px 0;color:#3E5157;vertical-align:top;white-space:nowrap">${escapeHtml(name)}</td><td class="ink" style="padding:2px 0">${escapeHtml(value)}</td></tr>`)
    .join("")}</table>`;

const todoList = (todo: readonly string[]) =>
  `<b>What to do</b>${todo.map((step, i) => `<br>${todo.length > 1 ? `${i + 1}. ` : ""}${escapeHtml(step)}`).join("")}`;

const buttonLink = ({ label, link }: Frame["button"]) =>
  `<a class="go" href="${escapeHtml(link)}" style="display:inline-block;background:#12262E;color:#F5F9F3;text-decoration:none;font-weight:600;font-size:16px;line-height:24px;padding:12px 22px;border-radius:3px">${escapeHtml(label)}</a>`;

const quietLink = ({ label, link }: Frame["button"]) => `<a href="${escapeHtml(link)}" style="color:#3E5157">${escapeHtml(label)}</a>`;

const TINTS = { 1: "background:#3D8FBD;color:#06202F", 2: "background:#1E6A9B;color:#FFFFFF", 3: "background:#124872;color:#FFFFFF" } as const;
const WIDTHS = { air: 5, liquid: 12, halt: 5 } as const;

function stripTable(cells: readonly StripCell[]): string {
  const total = cells.reduce((sum, { kind }) => sum + WIDTHS[kind], 0);
  const drawn = cells.map(({ kind, letter, tint }) => {
    const width = `${((100 * WIDTHS[kind]) / Math.max(total, 60)).toFixed(1)}%`;
    if (kind === "halt") return `<td width="${width}" class="alarm" style="background:#B3300A;color:#FFFFFF">&#9670;</td>`;
    if (kind === "air") return `<td width="${width}" class="ink2" style="border-bottom:2px solid #6F878F;color:#3E5157">A</td>`;
    return `<td width="${width}" style="${TINTS[tint]}">${escapeHtml(letter)}</td>`;
  });
  const rest = total < 60 ? "<td></td>" : "";
  return `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="table-layout:fixed;font-size:12px;line-height:26px;text-align:center;font-weight:600"><tr>${drawn.join("")}${rest}</tr></table>`;
}

export const escapeHtml = (text: string): string =>
  text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
