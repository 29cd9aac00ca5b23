"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Option, OptionGroup } from "@/components/ui/field";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { address } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, plural } from "@/lib/format";

const WHAT = {
  phases: { name: "Phases", means: "One row a phase: value, uncertainty, temperature, flags" },
  readings: { name: "Readings", means: "One row a repeat, as fitted, those left out marked" },
  results: { name: "Results", means: "Drift, Allan deviation and the shifts of the air reference, each with its interval" },
} as const;

const FORMATS = {
  xlsx: { name: "Spreadsheet", means: "With a sheet that says where the numbers come from and what the columns mean" },
  csv: { name: "CSV", means: "RFC 4180, units in the names" },
  json: { name: "JSON", means: "With the same said at its beginning" },
} as const;

/** What to export, and as what; the file comes while it is made. */
export function ExportDialog({ campaign, onClose }: { campaign: CampaignAnswer; onClose: () => void }) {
  const [what, setWhat] = useState<keyof typeof WHAT>("phases");
  const [format, setFormat] = useState<keyof typeof FORMATS>("xlsx");
  const { repeats } = campaign.progress;
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Export ${campaignCode(campaign.id)}`} description={`${formatCount(repeats)} ${plural(repeats, "repeat")} so far, fitted as the campaign’s pages show them.`}>
      <div className="mt-3 grid gap-4">
        <Choice legend="What" name="what" options={WHAT} chosen={what} onChoose={setWhat} />
        <Choice legend="As" name="format" options={FORMATS} chosen={format} onChoose={setFormat} />
      </div>
      <div className="buttons">
        <a className="button primary" href={address(`/api/campaigns/${campaign.id}/export`, { what, format })} download onClick={onClose}>Export</a>
        <Button look="link" onClick={onClose}>Leave it</Button>
      </div>
    </Dialog>
  );
}

type ChoiceProps<Key extends string> = { legend: string; name: string; options: Readonly<Record<Key, { name: string; means: string }>>; chosen: Key; onChoose: (key: Key) => void };

function Choice<Key extends string>({ legend, name, options, chosen, onChoose }: ChoiceProps<Key>) {
  return (
    <OptionGroup legend={legend}>
      {(Object.keys(options) as Key[]).map((key) => (
        <Option key={key} type="radio" name={name} value={key} checked={chosen === key} onChange={() => onChoose(key)}>
          <b>{options[key].name}</b>
          <span className="small block text-ink2">{options[key].means}</span>
        </Option>
      ))}
    </OptionGroup>
  );
}
