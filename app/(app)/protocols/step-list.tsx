import { classNames } from "@/components/ui/class-names";
import { formatVolume, NO_VALUE } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";
import type { Block } from "@/lib/protocol/schema";
import { sentenceParts, sweepParts } from "@/lib/protocol/sentence";
import type { Difference } from "@/lib/protocols/compare";
import type { EstimateAnswer } from "@/lib/protocols/schema";
import { repeatFoot } from "./repeat-words";
import { Sentence } from "./sentence";
import { StepChip } from "./step-chip";

type StepListProps = {
  label: string;
  blocks: readonly Block[];
  /** What a turn of each step takes; absent where two versions are compared. */
  takes?: EstimateAnswer["blocks"];
  differences?: ReadonlyMap<string, Difference>;
};

/** Steps of a frozen version: sentences, nested between repeat signs. */
export function StepList({ label, blocks, ...shared }: StepListProps) {
  return (
    <ol className="step-list" aria-label={label}>
      {blocks.map((block) => <Step key={block.id} block={block} {...shared} />)}
    </ol>
  );
}

function Step({ block, takes, differences }: { block: Block } & Pick<StepListProps, "takes" | "differences">) {
  const difference = differences?.get(block.id);
  const changed = difference?.kind === "changed" ? difference.fields : undefined;
  const remark = difference && <Remark difference={difference} />;
  if ("blocks" in block) {
    const inner = block.kind === "untilClean" ? [...block.blocks, block.measure] : block.blocks;
    return (
      <li className="repeat-block">
        <div className={classNames("repeat-head", difference && "differs")}>
          <div className="words"><Sentence parts={sentenceParts(block)} changed={changed} />{remark}</div>
        </div>
        <StepList label={sentenceParts(block).map((part) => (typeof part === "string" ? part : part.value)).join("")} blocks={inner} takes={takes} differences={differences} />
        <div className="repeat-foot">{repeatFoot(block)}</div>
      </li>
    );
  }
  const { seconds, ml = 0 } = takes?.[block.id] ?? {};
  return (
    <li className={classNames("step", difference && "differs")}>
      <StepChip block={block} />
      <div className="words">
        <Sentence parts={sentenceParts(block)} changed={changed} />
        {block.kind === "measure" && <span className="second">{block.label && `${block.label}. `}<Sentence parts={sweepParts(block)} changed={changed} /></span>}
        {remark}
      </div>
      {takes && <span className={classNames("amount num", seconds === undefined && "none")}>{seconds === undefined ? NO_VALUE : formatDuration(seconds)}</span>}
      {takes && <span className={classNames("amount num", ml === 0 && "none")}>{ml > 0 ? formatVolume(ml) : NO_VALUE}</span>}
    </li>
  );
}

function Remark({ difference }: { difference: Difference }) {
  const text = { changed: "changed", onlyHere: "only in this version", moved: "at another place" }[difference.kind];
  return <span className={difference.kind === "changed" ? "visually-hidden" : "second"}> ({text})</span>;
}
