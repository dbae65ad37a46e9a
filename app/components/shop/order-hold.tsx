import { HoldClock } from "~/components/ui/hold";
import { LANGUAGE_TAG } from "~/languages/language";
import { count, fill, useLanguage, useMessages } from "~/languages/messages";

/** Until when an order's numbers are held, with the zone named; counts on where there is script. */
export function OrderHold(props: { until: Date; from: Date; seenAt: Date; zone: string }) {
  const { pay } = useMessages().checkout;
  const language = useLanguage();
  const tag = LANGUAGE_TAG[language];
  const named = (time: string) => `${time} ${zoneName(props.until, props.zone, tag)}`;
  const minutes = (n: number) => count(language, pay.minutes, n);
  return (
    <HoldClock
      until={props.until.toISOString()}
      from={props.from.toISOString()}
      now={props.seenAt.toISOString()}
      zone={props.zone}
      language={tag}
      words={{
        held: (time, left) => fill(pay.held, { time: named(time), minutes: minutes(left) }),
        over: (time) => fill(pay.over, { time: named(time) }),
        reassurance: pay.reassurance,
        spoken: (left) => fill(pay.spoken, { minutes: minutes(left) }),
      }}
    />
  );
}

function zoneName(at: Date, zone: string, tag: string): string {
  const parts = new Intl.DateTimeFormat(tag, { timeZone: zone, timeZoneName: "short" }).formatToParts(at);
  return parts.find((part) => part.type === "timeZoneName")?.value ?? zone;
}
