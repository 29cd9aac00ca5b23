import { AlarmMark } from "@/components/ui/alarm-mark";
import { Section } from "@/components/ui/page";

/** The states in plain words, for whoever meets them the first time. */
export function StateWords() {
  return (
    <Section head="Words">
      <div className="three small text-ink2">
        <ul className="alarm-words">
          <li><AlarmMark state="acknowledged" by="N. N." />, acknowledged</li>
          <li><AlarmMark state="returned" />, returned</li>
        </ul>
        <ul className="alarm-words">
          <li><AlarmMark state="cleared" />, it moves to Past</li>
          <li><AlarmMark state="shelved" until="14:00" />, laid over the others, with an end</li>
        </ul>
        <p>The states are those of ISA-18.2 in plain words. The count beside Today is of alarms that nobody has. Shelved alarms stay open, send no mail, and come back by themselves.</p>
      </div>
    </Section>
  );
}
