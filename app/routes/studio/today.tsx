import { href, Link } from "react-router";
import { price } from "~/components/shop/edition-view";
import { BenchHead, Block } from "~/components/studio/bench";
import { MoneyLine, NearlyGone } from "~/components/studio/standing";
import { type Task, TaskList } from "~/components/studio/task-list";
import { EmptyState } from "~/components/ui/empty-state";
import type { LeafPlacement } from "~/components/ui/leaf";
import { PressLink } from "~/components/ui/press";
import { Week } from "~/components/ui/week";
import { addDays, formatDay, formatInstant, isoDayInZone } from "~/domain/dates";
import { type TodayTask, today } from "~/domain/studio/today.server";
import type { Route } from "./+types/today";

export async function loader() {
  return today();
}

const PLACEMENTS: readonly string[] = [
  "in_hand",
  "held",
  "set_aside",
  "sold",
  "coming_back",
  "given",
  "kept",
  "consigned",
  "retired",
];
const isPlacement = (text: string): text is LeafPlacement => PLACEMENTS.includes(text);

export default function Today({ loaderData }: Route.ComponentProps) {
  const { day, zone, currency, tasks, sold, taken, nearlyGone, next } = loaderData;
  const sum = (amount: number) => price(amount, { currency, language: "en" });
  const days = Array.from({ length: 7 }, (_, i) => addDays(day, i - 6));
  const weekday = (d: string) =>
    new Intl.DateTimeFormat("en-GB", { weekday: "short", timeZone: "UTC" }).format(
      new Date(`${d}T12:00:00Z`),
    );
  return (
    <>
      <title>Today</title>
      <BenchHead
        title={formatDay(day, "en-GB")}
        says={
          tasks.length === 0
            ? "Nothing waits."
            : `${tasks.length} ${tasks.length === 1 ? "thing needs" : "things need"} doing.`
        }
        acts={
          <>
            <PressLink to={href("/studio/print-room")}>Print room</PressLink>
            <PressLink to={href("/studio/orders/new")}>Make an order by hand</PressLink>
          </>
        }
      />
      <div className="day">
        <div>
          <Block title="What needs doing">
            {tasks.length === 0 ? (
              <EmptyState>Orders, sheets and scans that need somebody stand here.</EmptyState>
            ) : (
              <TaskList tasks={tasks.map((task) => taskOf(task, zone, day))} />
            )}
          </Block>
        </div>
        <div>
          <Block title="Sold this week" aside="one sheet, one copy">
            <Week
              label="Sold this week, one sheet a copy"
              more={(n) => `and ${n}`}
              days={days.map((d) => {
                const copies = sold.filter((s) => s.day === d);
                return {
                  label: d === day ? "today" : weekday(d),
                  spoken: `${weekday(d)} ${Number(d.slice(8))}: ${copies.length} sold`,
                  isToday: d === day,
                  total: copies.length,
                  copies: copies.map((c) => ({
                    key: c.copyId,
                    number: c.number,
                    placement: "sold" as const,
                    word: "sold",
                  })),
                };
              })}
            />
            <MoneyLine
              items={[
                { term: "Taken in these seven days", sum: sum(taken.thisWeek), large: true },
                { term: "in the seven days before", sum: sum(taken.before) },
                { term: "given back", sum: sum(taken.back) },
                { term: "awaiting payment now", sum: sum(taken.awaited) },
              ]}
            />
          </Block>
          <Block title="Nearly gone">
            {nearlyGone.length === 0 ? (
              <p className="quiet">No open edition is down to its last three.</p>
            ) : (
              <NearlyGone
                items={nearlyGone.map((e) => {
                  const placements = e.placements.filter(isPlacement);
                  const left = placements.filter((p) => p === "in_hand").length;
                  return {
                    key: e.id,
                    title: e.title,
                    to: href("/studio/editions/:editionId", { editionId: e.id }),
                    left: `${left} of ${e.limit}`,
                    foreEdge: {
                      label: `${left} of ${e.limit} in hand`,
                      copies: placements.map((placement, i) => ({ number: i + 1, placement })),
                    },
                  };
                })}
              />
            )}
          </Block>
          <Block title="Next release">
            {next === null ? (
              <p className="quiet">No release is planned.</p>
            ) : (
              <p>
                <Link className="title-it" to={href("/studio/editions/:editionId", { editionId: next.id })}>
                  {next.title}
                </Link>
                <br />
                {next.limit} numbered, {formatInstant(next.releaseAt, zone, "en-GB")}
              </p>
            )}
          </Block>
        </div>
      </div>
    </>
  );
}

function taskOf(task: TodayTask, zone: string, day: string): Task {
  const many = (one: string, more: string) =>
    task.count === 1 ? one : more.replace("{n}", String(task.count));
  const since = task.since === null ? null : isoDayInZone(task.since, zone);
  const order = (to: string, label: string) => (
    <PressLink small to={to}>
      {label}
    </PressLink>
  );
  const orderPage =
    task.orderId === null
      ? href("/studio/orders")
      : href("/studio/orders/:orderId", { orderId: task.orderId });
  const roll =
    task.rollId === null ? href("/studio/rolls") : href("/studio/rolls/:rollId", { rollId: task.rollId });
  const when =
    since === null || since === day ? "today" : `since ${formatDay(since, "en-GB").replace(/ \d{4}$/, "")}`;
  const orders = (stands: string) => `${href("/studio/orders")}?stands=${stands}`;
  const tasks: Record<TodayTask["kind"], Omit<Task, "key" | "when">> = {
    attention: {
      what: many("An order needs a look", "{n} orders need a look"),
      late: true,
      act: order(task.count === 1 ? orderPage : orders("attention"), "Look at it"),
    },
    refund_by_hand: {
      what: many("Give money back by hand", "Give money back by hand, {n} times"),
      late: true,
      act: order(orderPage, "Open the order"),
    },
    to_send: {
      what: many("Send an order", "Send {n} orders"),
      more: "signed and ready",
      act: order(task.count === 1 ? orderPage : orders("to_do"), "Open"),
    },
    to_sign: {
      what: many("Check and sign a sheet", "Check and sign {n} sheets"),
      act: order(href("/studio/print-room"), "Print room"),
    },
    to_print: {
      what: many("Print a sheet", "Print {n} sheets"),
      act: order(href("/studio/print-room"), "Print room"),
    },
    transfer_due: {
      what: many("An order by hand awaits its payment", "{n} orders by hand await their payment"),
      act: order(task.count === 1 ? orderPage : orders("awaiting_payment"), "Open"),
    },
    email_failed: {
      what: many("An e-mail could not be sent", "{n} e-mails could not be sent"),
      late: true,
      act: order(orderPage, "Open the order"),
    },
    scan_refused: {
      what: many("A file was refused as a scan", "{n} files were refused as scans"),
      act: order(roll, "Open the roll"),
    },
    proof_failed: {
      what: many("A proof could not be made", "{n} proofs could not be made"),
      late: true,
      act: order(roll, "Open the roll"),
    },
  };
  return { key: task.key, when, ...tasks[task.kind] };
}
