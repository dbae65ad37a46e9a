import { type RefObject, useEffect, useRef, useState } from "react";
import { href } from "react-router";
import type { EditionFigures } from "~/domain/editions/edition-figures";

/** After the last key, ms: long enough not to ask at every figure typed. */
const SETTLED = 250;

/** What the form says now, as the address that the figures are asked for at. */
function addressOf(form: HTMLFormElement): string {
  const search = new URLSearchParams();
  for (const [name, value] of new FormData(form)) {
    if (typeof value === "string" && name !== "furtherEditions") search.append(name, value);
  }
  return `${href("/studio/editions/figures")}?${search}`;
}

/**
 * The figures of a plan while its form is filled in: those the server gave with the page, then those it gives for what is
 * typed. Asked for beside the router, since figures that do not come must not take away a form half filled in: the
 * last ones stay.
 */
export function useLiveFigures(
  form: RefObject<HTMLFormElement | null>,
  first: EditionFigures,
): { figures: EditionFigures; changed: () => void } {
  const [live, setLive] = useState<EditionFigures | null>(null);
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const asked = useRef<AbortController>(undefined);
  useEffect(
    () => () => {
      clearTimeout(timer.current);
      asked.current?.abort();
    },
    [],
  );
  async function ask() {
    if (form.current === null) return;
    asked.current?.abort();
    const controller = new AbortController();
    asked.current = controller;
    const { signal } = controller;
    try {
      const answer = await fetch(addressOf(form.current), {
        signal,
        headers: { Accept: "application/json" },
      });
      if (!answer.ok) return;
      const { figures }: { figures: EditionFigures | null } = await answer.json();
      if (!signal.aborted && figures !== null) setLive(figures);
    } catch {
      // Not reached, or asked again meanwhile: the press "Work it out" is still there.
    }
  }
  function changed() {
    clearTimeout(timer.current);
    timer.current = setTimeout(ask, SETTLED);
  }
  return { figures: live ?? first, changed };
}
