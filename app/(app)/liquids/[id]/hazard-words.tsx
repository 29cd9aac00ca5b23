import type { ReactNode } from "react";
import { FLASH_POINT_MARGIN_C } from "@/lib/campaigns/cautions";
import { formatNumber } from "@/lib/format";
import type { LiquidAnswer } from "@/lib/liquids/schema";

export function HazardWords({ hazards: { statements, flashPointC, waste, notWith } }: { hazards: LiquidAnswer["hazards"] }) {
  return (
    <div>
      <dl className="grid max-w-[52em] grid-cols-[150px_minmax(0,1fr)] gap-x-4 phone:grid-cols-1">
        <Row name="Hazard statements">
          {statements.length === 0
            ? "None recorded."
            : statements.map(({ code, hazardClass, text }) => (
                <p key={code}><b>{hazardClass ?? code}</b>{hazardClass && `, ${code}`}{text && `: ${text}.`}</p>
              ))}
        </Row>
        <Row name="Flash point">
          {flashPointC === null ? "Not recorded." : (
            <>
              {formatNumber(flashPointC)} °C
              <p className="small text-ink2">Above {formatNumber(flashPointC - FLASH_POINT_MARGIN_C)} °C, the flash point less {FLASH_POINT_MARGIN_C} °C, a campaign needs a named person’s acknowledgement.</p>
            </>
          )}
        </Row>
        <Row name="Compatible waste">{waste ?? "Not recorded."}</Row>
        <Row name="Not to be mixed with">{notWith.length > 0 ? notWith.join("; ") : "Nothing recorded."}</Row>
      </dl>
      <p className="caption">Local rules and the laboratory’s safety officer decide what may stand on a bench and how long.</p>
    </div>
  );
}

function Row({ name, children }: { name: string; children: ReactNode }) {
  return (
    <>
      <dt className="border-t border-rule py-1.5 text-ink2">{name}</dt>
      <dd className="border-t border-rule py-1.5 phone:border-t-0 phone:pt-0">{children}</dd>
    </>
  );
}
