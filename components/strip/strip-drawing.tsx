import { memo } from "react";
import type { StripLayout, StripShape } from "./strip-geometry";
import type { StripBlock } from "./short-cycles";
import type { TraceLayout } from "./trace-geometry";
import { HATCH, liquidFill, liquidInk, liquidLine } from "./tint";

/** Everything of a strip that does not move with the cursor. */
export const StripDrawing = memo(function StripDrawing({ layout, haltOpen }: { layout: StripLayout; haltOpen: boolean }) {
  const { measures, base, roof, haltX, silentX, width } = layout;
  return (
    <g aria-hidden="true">
      {layout.shapes.map((shape) => <Shape key={`${shape.index}-${shape.planned}`} shape={shape} />)}
      {layout.blocks.map((block) => <Block key={block.x0} block={block} base={base} roof={roof} />)}
      {layout.letters.map(({ x, y, text, tint, planned }) => (
        <text key={`${x}-${y}`} className="letter" x={x} y={y} textAnchor="middle" style={planned ? { fill: "var(--ink2)" } : haloed(tint)}>{text}</text>
      ))}
      {layout.cycles.map(({ x, text, current }) => (
        <text key={x} x={x} y={base + 15} textAnchor="middle" className={current ? "strong halo" : undefined}>{text}</text>
      ))}
      {silentX !== undefined && <path d={`M${silentX} ${base - 1}H${width}`} stroke="var(--ink3)" strokeWidth="2" strokeDasharray="1 5" />}
      {layout.trace && <Trace trace={layout.trace} large={measures.large} />}
      {haltX !== undefined && (
        <g style={{ color: haltOpen ? "var(--alarm)" : "var(--ink)" }}>
          <path d={`M${haltX} ${roof - 5}V${base}`} stroke="currentColor" strokeWidth="2" />
          {haltOpen && <path d={`M${haltX} ${roof - 7}l5.5 5.5l-5.5 5.5l-5.5 -5.5z`} fill="currentColor" />}
        </g>
      )}
    </g>
  );
});

const haloed = (tint: 1 | 2 | 3): React.CSSProperties => ({
  fill: liquidInk(tint),
  ...(tint > 1 && { paintOrder: "stroke", stroke: `var(--liq${tint})`, strokeWidth: 5, strokeLinejoin: "round" }),
});

function Shape({ shape: { kind, planned, d, line, tint = 1 } }: { shape: StripShape }) {
  switch (kind) {
    case "air":
      return <path d={d} stroke="var(--air)" strokeWidth="2" strokeDasharray={planned ? "2 3" : undefined} />;
    case "fill":
      return planned ? <path d={d} fill="none" stroke="var(--fill)" strokeWidth="1.25" /> : <path d={d} fill="var(--fill)" />;
    case "liquid":
      return planned ? (
        <>
          <path d={d} fill={`var(--liq${tint})`} opacity=".11" />
          <path d={line} fill="none" stroke={liquidLine(tint)} strokeWidth="1.25" />
        </>
      ) : (
        <path d={d} fill={liquidFill(tint)} />
      );
    case "clean":
      return planned ? <path d={d} fill="none" stroke="var(--clean)" /> : <path d={d} fill="url(#texture-clean)" stroke="var(--clean)" strokeWidth=".75" />;
    case "dry":
      return planned ? <path d={d} fill="none" stroke="var(--dry)" /> : <path d={d} fill="url(#texture-dry)" stroke="var(--dry)" strokeWidth=".75" />;
    case "held":
    case "wait":
      return (
        <>
          {!planned && <path d={d} fill={HATCH} />}
          <path d={line} stroke="var(--air)" strokeWidth="2" strokeDasharray={planned ? "2 3" : undefined} />
        </>
      );
    case "end":
      return (
        <>
          <path d={line} stroke="var(--ink)" />
          <path d={d} stroke="var(--ink)" strokeWidth="2.5" />
        </>
      );
  }
}

/** Many short cycles: solid to the share of time the cell is full, teeth to the full level. */
function Block({ block: { x0, x1, xNow, full, letter, tint, cycles }, base, roof }: { block: StripBlock; base: number; roof: number }) {
  const y = base - (base - roof) * full;
  let teeth = "";
  for (let x = x0 + 1; x < xNow; x += 3) teeth += `M${x.toFixed(1)} ${roof}V${y.toFixed(1)}`;
  const words = `${letter}, ${cycles} cycles`;
  const longWords = words.length * 6.6;
  const text = x1 - x0 > longWords + 8 ? words : x1 - x0 > 14 ? letter : "";
  const past = xNow - x0 > longWords + 8 || xNow >= x1;
  const middle = past ? (x0 + xNow) / 2 : xNow > x0 && x1 - xNow > longWords ? (xNow + x1) / 2 : (x0 + x1) / 2;
  const inside = past ? xNow - x0 : x1 - xNow;
  return (
    <g>
      {xNow > x0 && (
        <>
          <path d={teeth} stroke={`var(--liq${tint})`} strokeWidth="1.2" />
          <rect x={x0} y={y} width={xNow - x0} height={base - y} fill={liquidFill(tint)} />
        </>
      )}
      {xNow < x1 && (
        <>
          <rect x={xNow} y={y} width={x1 - xNow} height={base - y} fill={`var(--liq${tint})`} opacity=".11" />
          <path d={`M${xNow} ${y}H${x1}V${base}`} fill="none" stroke={liquidLine(tint)} strokeWidth="1.25" />
          <path d={`M${xNow} ${roof + 0.5}H${x1}`} stroke={liquidLine(tint)} strokeDasharray="1 2" />
        </>
      )}
      {text && inside > 14 && (
        <text className="letter" x={middle} y={Math.min(base - 4, (y + base) / 2 + 4)} textAnchor="middle" style={past ? haloed(tint) : { fill: "var(--ink2)" }}>{text}</text>
      )}
    </g>
  );
}

function Trace({ trace, large }: { trace: TraceLayout; large: boolean }) {
  return (
    <g>
      {trace.band && <rect {...trace.band} fill="var(--band)" />}
      <path d={`M${trace.zero.x0} ${trace.zero.y}H${trace.zero.x1}`} stroke="var(--rule2)" strokeDasharray="1 3" />
      <path d={trace.joins} stroke="var(--rule3)" strokeDasharray="1 2.5" fill="none" />
      {large && trace.limitY?.map((y) => <path key={y} d={`M${trace.zero.x0} ${y}H${trace.zero.x1}`} stroke="var(--ink3)" strokeDasharray="6 3" />)}
      {trace.phases.map((phase) =>
        large ? (
          <g key={phase.x0}>
            {phase.points.length > 1 && <path d={dots(phase.points)} stroke="var(--ink3)" strokeWidth="2.2" strokeLinecap="round" opacity=".55" />}
            <path d={`M${phase.x0} ${phase.meanY}H${phase.x1}`} stroke="var(--ink)" strokeWidth="2.25" />
          </g>
        ) : (
          <path key={phase.x0} d={phase.points.length > 1 ? `M${phase.points.map(({ x, y }) => `${x} ${y}`).join("L")}` : `M${phase.x0} ${phase.meanY}H${phase.x1}`} fill="none" stroke="var(--ink)" strokeWidth="1.4" strokeLinejoin="round" />
        ),
      )}
    </g>
  );
}

/** Points as one path of round caps: a phase may hold thousands. */
const dots = (points: readonly { x: number; y: number }[]) => points.map(({ x, y }) => `M${x} ${y}h0`).join("");
