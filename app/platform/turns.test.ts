import { describe, expect, it } from "vitest";
import { turns } from "./turns";

/** Work that ends when it is told to. */
function held() {
  let end: () => void = () => undefined;
  let started = false;
  const done = new Promise<void>((resolve) => {
    end = resolve;
  });
  return {
    work: () => {
      started = true;
      return done;
    },
    end: () => end(),
    started: () => started,
  };
}

/** Until everything that can go on by itself has gone on. */
const settled = () => new Promise((resolve) => setImmediate(resolve));

describe("turns", () => {
  it("lets so many run, lets the next ones wait in order, and refuses the rest", async () => {
    const two = turns({ atOnce: 2, mostWaiting: 2, retryAfter: 10 });
    const [a, b, c, d, e] = [held(), held(), held(), held(), held()];
    const taken = [a, b, c, d].map(({ work }) => two.take(work));
    expect(two.standing()).toEqual({ running: 2, waiting: 2 });
    await expect(two.take(e.work)).rejects.toMatchObject({ code: "unavailable", data: { retryAfter: 10 } });
    expect([a, b, c, d, e].map((piece) => piece.started())).toEqual([true, true, false, false, false]);
    b.end();
    await settled();
    expect([c.started(), d.started()]).toEqual([true, false]);
    expect(two.standing()).toEqual({ running: 2, waiting: 1 });
    for (const piece of [a, c, d]) piece.end();
    await Promise.all(taken);
    expect(two.standing()).toEqual({ running: 0, waiting: 0 });
  });

  it("passes a failure on and gives its place to the next", async () => {
    const one = turns({ atOnce: 1, mostWaiting: 5, retryAfter: 1 });
    const failing = one.take(() => Promise.reject(new Error("broken")));
    const following = one.take(() => Promise.resolve("done"));
    await expect(failing).rejects.toThrow("broken");
    await expect(following).resolves.toBe("done");
    expect(one.standing()).toEqual({ running: 0, waiting: 0 });
  });
});
