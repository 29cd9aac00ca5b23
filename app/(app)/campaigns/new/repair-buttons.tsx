"use client";

import { useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { LoadPort } from "../../record/load-port";
import { MountSensor } from "../../record/mount-sensor";
import type { Repair } from "./repairs";
import type { Draft } from "./use-draft";

/** The buttons that put a problem right. */
export function RepairButtons({ repairs, onChange }: { repairs: readonly Repair[]; onChange: (changes: Partial<Draft>) => void }) {
  const [asking, setAsking] = useState<Repair>();
  const close = () => setAsking(undefined);
  return (
    <>
      {repairs.map((repair) =>
        repair.do === "open" ? (
          <LinkButton key={repair.label} small href={repair.href}>{repair.label}</LinkButton>
        ) : (
          <Button key={repair.label} small onClick={() => (repair.do === "change" ? onChange(repair.changes) : setAsking(repair))}>{repair.label}</Button>
        ),
      )}
      {asking?.do === "load" && <LoadPort rigId={asking.rigId} port={asking.port} onClose={close} />}
      {asking?.do === "mount" && <MountSensor sensorId={asking.sensorId} rigId={asking.rigId} onClose={close} />}
    </>
  );
}
