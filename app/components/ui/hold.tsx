import { useEffect, useRef, useState } from "react";

export type HoldWords = {
  /** The sentence that leads, from the time of day and the whole minutes left: "Held for you until 18:42 Ember time: 12 minutes left." */
  held: (time: string, minutes: number) => string;
  /** What it says once the time has passed. */
  over: (time: string) => string;
  /** Said below it in both cases. */
  reassurance: string;
  /** Spoken at ten, five and one minute. */
  spoken: (minutes: number) => string;
};

export type HoldClockProps = {
  /** When the hold ends, ISO 8601. */
  until: string;
  /** What the server's clock said when the page was made, ISO 8601. */
  now: string;
  /** When it began, ISO 8601; twenty minutes before the end when left out. */
  from?: string;
  /** The zone the time of day is given in, by its IANA name. */
  zone: string;
  /** Language of the time of day, as in `<html lang>`. */
  language: string;
  words: HoldWords;
};

const minute = 60_000;
const spokenAt = [10, 5, 1];
/** The most ticks that can still be told apart on a telephone. */
const mostTicks = 60;

function timeOfDay(at: number, language: string, zone: string): string {
  return new Intl.DateTimeFormat(language, {
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
    timeZone: zone,
  }).format(at);
}

/**
 * How long a copy stays set aside: the time of day first, the minutes second. It is right as the server
 * wrote it; with script it counts on, by the server's clock and not the reader's.
 */
export function HoldClock({ until, now, from, zone, language, words }: HoldClockProps) {
  const ends = Date.parse(until);
  const asked = Date.parse(now);
  const begins = from ? Date.parse(from) : ends - 20 * minute;
  const [minutes, setMinutes] = useState(() => Math.max(0, Math.ceil((ends - asked) / minute)));
  const [spoken, setSpoken] = useState("");
  const say = useRef(words.spoken);
  say.current = words.spoken;

  useEffect(() => {
    const shown = performance.now();
    let timer: ReturnType<typeof setTimeout>;
    function tick() {
      const left = ends - (asked + performance.now() - shown);
      const whole = Math.max(0, Math.ceil(left / minute));
      setMinutes(whole);
      if (spokenAt.includes(whole)) setSpoken(say.current(whole));
      if (left > 0) timer = setTimeout(tick, left - (whole - 1) * minute + 1);
    }
    function wake() {
      if (document.visibilityState !== "visible") return;
      clearTimeout(timer);
      tick();
    }
    tick();
    document.addEventListener("visibilitychange", wake);
    return () => {
      clearTimeout(timer);
      document.removeEventListener("visibilitychange", wake);
    };
  }, [ends, asked]);

  const time = timeOfDay(ends, language, zone);
  return (
    <div className="hold">
      <p>
        <b>{minutes > 0 ? words.held(time, minutes) : words.over(time)}</b>
        <br />
        <span className="quiet">{words.reassurance}</span>
      </p>
      <HoldRule
        total={Math.round((ends - begins) / minute)}
        left={minutes}
        ends={[timeOfDay(begins, language, zone), time]}
      />
      <p className="vh" role="status">
        {spoken}
      </p>
    </div>
  );
}

/** One tick a minute, those that are left thick, counted from the end. */
function HoldRule({ total, left, ends }: { total: number; left: number; ends: [string, string] }) {
  const every = Math.max(1, Math.ceil(total / mostTicks));
  const count = Math.max(1, Math.ceil(total / every));
  return (
    <div aria-hidden="true">
      <svg className="hold-rule" width="100%" height="32" aria-hidden="true" focusable="false">
        {Array.from({ length: count }, (_, at) => {
          const kept = (count - at) * every <= left;
          const long = at % 5 === 0;
          return (
            <rect
              // biome-ignore lint/suspicious/noArrayIndexKey: a tick is its place
              key={at}
              className={kept ? "tick tick-left" : "tick"}
              x={`${(at / count) * 100}%`}
              y={long ? "25%" : "55%"}
              width={kept ? 4 : 1}
              height={long ? "75%" : "45%"}
            />
          );
        })}
      </svg>
      <div className="hold-rule-ends">
        <span>{ends[0]}</span>
        <span>{ends[1]}</span>
      </div>
    </div>
  );
}
