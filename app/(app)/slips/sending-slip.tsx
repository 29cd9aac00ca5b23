import { Button } from "@/components/ui/button";
import { Slip } from "@/components/ui/slip";
import { formatTime } from "@/lib/format-time";
import type { KeptAnswer } from "@/lib/tasks/outbox";

/** An answer that is not out yet: dashed and unfilled, and can be taken back until it is. */
export function SendingSlip({ kept: { at, timeZone, title, verb }, onTakeBack }: { kept: KeptAnswer; onTakeBack: () => void }) {
  return (
    <Slip kind="sending" when={`Answered ${formatTime(at, timeZone)}`} status="Sending" title={title} actions={<Button look="link" onClick={onTakeBack}>Take it back</Button>}>
      <p>You said <b>{verb}</b>. It waits on this device and goes out by itself when there is a network. Leave the page if you like.</p>
    </Slip>
  );
}

/** The server did not take an answer, and the task is no longer open. */
export function RefusedSlip({ kept: { at, timeZone, title, verb, refusal }, onSeen }: { kept: KeptAnswer; onSeen: () => void }) {
  return (
    <Slip kind="sending" when={`Answered ${formatTime(at, timeZone)}`} status="Not taken" title={title} actions={<Button look="link" onClick={onSeen}>Seen</Button>}>
      <p>You said <b>{verb}</b>. {refusal}</p>
    </Slip>
  );
}
