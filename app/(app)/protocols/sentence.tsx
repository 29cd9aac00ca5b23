import type { SentencePart } from "@/lib/protocol/sentence";

type SentenceProps = {
  parts: readonly SentencePart[];
  /** Fields that another version says otherwise. */
  changed?: ReadonlySet<string>;
};

/** A step or limit in words; its first word is heavier, its values too. */
export function Sentence({ parts, changed }: SentenceProps) {
  return parts.map((part, index) => {
    if (typeof part === "string") return index === 0 ? <FirstWord key={index} text={part} /> : part;
    return <span key={index} className={changed && differs(changed, part.path) ? "value changed" : "value"}>{part.value}</span>;
  });
}

export function FirstWord({ text }: { text: string }) {
  const end = text.indexOf(" ", 0) < 0 ? text.length : text.indexOf(" ");
  return <><b>{text.slice(0, end)}</b>{text.slice(end)}</>;
}

/** A sentence shows `until` where the field is `until.time`. */
const differs = (changed: ReadonlySet<string>, path: string) => [...changed].some((field) => field === path || field.startsWith(`${path}.`) || path.startsWith(`${field}.`));
