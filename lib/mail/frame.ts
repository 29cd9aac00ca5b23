type Frame = {
  title: string;
  sentence: string;
  facts: readonly (readonly [string, string])[];
  button: { label: string; link: string };
  foot: string;
};

const INK = "#12262e";
const QUIET = "#566a6e";

/** A mail's HTML: one table of at most 620 px, inline styles, no images. */
export function frame({ title, sentence, facts, button, foot }: Frame): string {
  const rows = facts
    .map(
      ([name, value]) =>
        `<tr><td style="padding:4px 16px 4px 0;color:${QUIET};vertical-align:top;white-space:nowrap">${escapeHtml(name)}</td><td style="padding:4px 0">${escapeHtml(value)}</td></tr>`,
    )
    .join("");
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escapeHtml(title)}</title></head>
<body style="margin:0;background:#eff3ec"><table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="max-width:620px;margin:0 auto;background:#f9fbf7;color:${INK};font:16px/24px 'Segoe UI',system-ui,sans-serif">
<tr><td style="padding:24px 24px 8px;font:600 18px/24px 'Segoe UI',system-ui,sans-serif;border-bottom:1px solid #cdd8cd">Longreed</td></tr>
<tr><td style="padding:20px 24px 8px;font:26px/32px Georgia,serif">${escapeHtml(sentence)}</td></tr>
<tr><td style="padding:8px 24px"><table role="presentation" cellpadding="0" cellspacing="0" style="font:14px/20px 'Segoe UI',system-ui,sans-serif">${rows}</table></td></tr>
<tr><td style="padding:16px 24px"><a href="${escapeHtml(button.link)}" style="display:inline-block;padding:12px 20px;background:${INK};color:#f5f9f3;text-decoration:none;border-radius:3px;font-weight:600">${escapeHtml(button.label)}</a></td></tr>
<tr><td style="padding:8px 24px 24px;color:${QUIET};font:12.5px/18px 'Segoe UI',system-ui,sans-serif">${escapeHtml(foot)}</td></tr>
</table></body></html>`;
}

export const escapeHtml = (text: string): string =>
  text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
