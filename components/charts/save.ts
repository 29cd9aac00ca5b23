import type { Twin } from "./plot";

/** RFC 4180, with full precision and a point as decimal sign. A cell that a spreadsheet would run as a formula is written as text. */
export function tableAsCsv({ columns, rows }: Pick<Twin, "columns" | "rows">): string {
  return [columns.map(({ head }) => head), ...rows].map((row) => row.map(csvCell).join(",")).join("\r\n") + "\r\n";
}

function csvCell(value: string | number | null): string {
  if (value === null || (typeof value === "number" && !Number.isFinite(value))) return "";
  if (typeof value === "number") return String(value);
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

export const saveText = (name: string, type: string, text: string): void => save(name, new Blob([text], { type: `${type};charset=utf-8` }));

function save(name: string, content: Blob): void {
  const url = URL.createObjectURL(content);
  const link = Object.assign(document.createElement("a"), { href: url, download: name });
  link.click();
  setTimeout(() => URL.revokeObjectURL(url), 1000);
}

const DRAWN = ["fill", "stroke", "stroke-width", "stroke-dasharray", "stroke-linecap", "stroke-linejoin", "opacity", "paint-order", "font-family", "font-size", "font-weight", "font-style", "font-stretch", "text-anchor"];

/** The drawing as a file of its own: colours and type written into it, textures taken along. Light or dark as it is seen. */
export function svgOf(holder: HTMLElement | null, label: string): string {
  const drawing = holder?.querySelector("svg");
  if (!drawing) return "";
  const copy = drawing.cloneNode(true) as SVGSVGElement;
  const seen = [drawing, ...drawing.querySelectorAll<SVGElement>("*")];
  [copy, ...copy.querySelectorAll<SVGElement>("*")].forEach((element, i) => {
    const style = getComputedStyle(seen[i] ?? drawing);
    for (const name of DRAWN) element.style.setProperty(name, style.getPropertyValue(name));
    element.removeAttribute("class");
    element.removeAttribute("tabindex");
  });
  const defs = document.createElementNS("http://www.w3.org/2000/svg", "defs");
  for (const pattern of document.querySelectorAll<SVGPatternElement>("pattern[id^=texture-]")) {
    const taken = pattern.cloneNode(true) as SVGPatternElement;
    taken.querySelectorAll<SVGElement>("*").forEach((part, i) => {
      const source = pattern.querySelectorAll("*")[i];
      if (source) part.style.setProperty("fill", getComputedStyle(source).fill);
    });
    defs.append(taken);
  }
  const title = document.createElementNS("http://www.w3.org/2000/svg", "title");
  title.textContent = label;
  copy.prepend(title, defs);
  copy.setAttribute("xmlns", "http://www.w3.org/2000/svg");
  copy.setAttribute("viewBox", `0 0 ${drawing.clientWidth} ${drawing.clientHeight}`);
  copy.style.setProperty("background", getComputedStyle(document.body).backgroundColor);
  return new XMLSerializer().serializeToString(copy);
}

/** Pixels of the picture to a pixel of the page: sharp in print at the size seen. */
const PNG_SCALE = 3;

/** The drawing as a picture, as it is seen, with the page's own type. */
export async function savePng(name: string, holder: HTMLElement | null, label: string): Promise<void> {
  const drawing = holder?.querySelector("svg");
  if (!drawing) return;
  const faces = `<style>${await fontFaces()}</style>`;
  const svg = svgOf(holder, label).replace(/^(<svg[^>]*>)/, `$1${faces}`);
  const url = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(svg)}`;
  const picture = Object.assign(new Image(drawing.clientWidth, drawing.clientHeight), { src: url });
  await picture.decode();
  const canvas = Object.assign(document.createElement("canvas"), { width: drawing.clientWidth * PNG_SCALE, height: drawing.clientHeight * PNG_SCALE });
  const context = canvas.getContext("2d");
  if (!context) return;
  context.fillStyle = getComputedStyle(document.body).backgroundColor;
  context.fillRect(0, 0, canvas.width, canvas.height);
  context.drawImage(picture, 0, 0, canvas.width, canvas.height);
  const content = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, "image/png"));
  if (content) save(name, content);
}

/** A picture reads nothing from outside itself: the page's faces go into it. */
async function fontFaces(): Promise<string> {
  const rules = [...document.styleSheets].flatMap((sheet) => [...sheet.cssRules]).filter((rule) => rule instanceof CSSFontFaceRule);
  const texts = rules.map(async ({ cssText, parentStyleSheet }) => {
    const address = /url\(["']?([^"')]+)["']?\)/.exec(cssText)?.[1];
    if (!address) return "";
    const content = await (await fetch(new URL(address, parentStyleSheet?.href ?? document.baseURI))).blob();
    const data = await new Promise<string>((resolve) => {
      const reader = new FileReader();
      reader.onload = () => resolve(String(reader.result));
      reader.readAsDataURL(content);
    });
    return cssText.replace(address, data);
  });
  return (await Promise.all(texts)).join("");
}
