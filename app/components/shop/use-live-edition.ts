import { useEffect, useState } from "react";
import { href } from "react-router";
import type { ShownEdition } from "~/domain/prints/catalogue.server";
import type { ApiEdition } from "~/domain/prints/public-api";

/** How often an open page asks where the numbers stand (milliseconds); a hidden page does not ask. */
const EVERY = 5_000;

/**
 * The edition as it stands now: what the page came with, kept up to date from the public API while the page is
 * seen. Without scripts, or while the line is down, it stays as it came.
 */
export function useLiveEdition(edition: ShownEdition): ShownEdition {
  const [live, setLive] = useState(edition);
  useEffect(() => setLive(edition), [edition]);
  const { id } = edition;
  useEffect(() => {
    const stop = new AbortController();
    const ask = async () => {
      if (document.visibilityState === "hidden") return;
      try {
        const answer = await fetch(href("/api/v1/editions/:id", { id }), { signal: stop.signal });
        if (!answer.ok) return;
        const told: ApiEdition = await answer.json();
        setLive((before) => ({
          ...before,
          sale: told.sale,
          closed: told.closed,
          free: told.free,
          held: told.held,
          nextNumber: told.nextNumber,
          copies: told.copies,
          formats: before.formats.map((format) => ({
            ...format,
            nextAmount: told.formats.find((f) => f.id === format.id)?.nextAmount ?? null,
          })),
        }));
      } catch {
        // The line is down or the page is left: what was last known stays.
      }
    };
    const timer = setInterval(ask, EVERY);
    document.addEventListener("visibilitychange", ask);
    return () => {
      stop.abort();
      clearInterval(timer);
      document.removeEventListener("visibilitychange", ask);
    };
  }, [id]);
  return live;
}
