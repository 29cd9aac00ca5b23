import { classNames } from "@/components/ui/class-names";
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
    return <span key={index} className={classNames("value", isShort(part.value) && "short", changed && differs(changed, part.path) && "changed")}>{part.value}</span>;
  });
}

export function FirstWord({ text }: { text: string }) {
  const end = text.indexOf(" ", 0) < 0 ? text.length : text.indexOf(" ");
  return <><b>{text.slice(0, end)}</b>{text.slice(end)}</>;
}

/** A number stays with its unit; a list or an instruction may break. */
export const isShort = (value: string): boolean => value.length <= 24;

/** A sentence shows `until` where the field is `until.time`. */
const differs = (changed: ReadonlySet<string>, path: string) => [...changed].some((field) => field === path || field.startsWith(`${path}.`) || path.startsWith(`${field}.`));
