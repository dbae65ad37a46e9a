import { href, Link } from "react-router";
import { Field } from "~/components/form/field";
import { FilterBar } from "~/components/form/filter-bar";
import { Select } from "~/components/form/select";
import { price } from "~/components/shop/edition-view";
import { BenchHead } from "~/components/studio/bench";
import { EmptyState } from "~/components/ui/empty-state";
import { Pager } from "~/components/ui/pager";
import { PressLink } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { signedInContext } from "~/context";
import { formatDay, isoDayInZone } from "~/domain/dates";
import {
  findOrders,
  ORDERS_A_PAGE,
  type OrdersWanted,
  ordersWanted,
} from "~/domain/orders/find-orders.server";
import { STANDS_WORDS } from "~/domain/orders/studio-words";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import type { Route } from "./+types/orders";

export async function loader({ url, context }: Route.LoaderArgs) {
  const wanted = ordersWanted(url.searchParams);
  const [{ zone }, { rows, total }] = await Promise.all([theStudio(), findOrders(wanted)]);
  return {
    wanted,
    total,
    perPage: ORDERS_A_PAGE,
    mayMake: can(context.get(signedInContext).roles, "orders.make"),
    rows: rows.map(({ createdAt, ...row }) => ({
      ...row,
      on: formatDay(isoDayInZone(createdAt, zone), "en-GB"),
    })),
  };
}

function address(wanted: OrdersWanted, change: Partial<OrdersWanted>): string {
  const next = { ...wanted, page: 1, ...change };
  const search = new URLSearchParams();
  if (next.q !== "") search.set("q", next.q);
  if (next.stands !== "") search.set("stands", next.stands);
  if (next.sort !== "number") search.set("sort", next.sort);
  if (!next.descending) search.set("order", "up");
  if (next.page > 1) search.set("page", String(next.page));
  return `${href("/studio/orders")}${search.size === 0 ? "" : `?${search}`}`;
}

export default function Orders({ loaderData }: Route.ComponentProps) {
  const { wanted, rows, total, perPage } = loaderData;
  const first = (wanted.page - 1) * perPage + 1;
  const sorted = (sort: OrdersWanted["sort"]) => ({
    to: address(wanted, { sort, descending: wanted.sort === sort ? !wanted.descending : sort !== "buyer" }),
    ...(wanted.sort === sort
      ? { order: wanted.descending ? ("descending" as const) : ("ascending" as const) }
      : {}),
  });
  return (
    <>
      <title>Orders</title>
      <BenchHead
        title="Orders"
        says={total === 1 ? "One order." : `${total} orders.`}
        acts={
          loaderData.mayMake ? (
            <PressLink to={href("/studio/orders/new")}>Make an order by hand</PressLink>
          ) : null
        }
      />
      <FilterBar label="Find orders" submit="Show" clear={<Link to={href("/studio/orders")}>Show all</Link>}>
        <Field label="Number, buyer, e-mail or print" name="q" type="search" defaultValue={wanted.q} />
        <Select
          label="Where it stands"
          name="stands"
          defaultValue={wanted.stands}
          options={[
            { value: "", label: "Anywhere" },
            { value: "to_do", label: "Paid, not sent yet" },
            { value: "awaiting_payment", label: "Awaiting payment" },
            { value: "paid", label: "Paid" },
            { value: "sent", label: "Sent" },
            { value: "ended", label: "Cancelled or expired" },
            { value: "attention", label: "Needs a look" },
          ]}
        />
      </FilterBar>
      <Table
        caption="Orders"
        variant="dense"
        rows={rows}
        rowKey={(o) => o.id}
        empty={<EmptyState>No order answers to that.</EmptyState>}
        columns={[
          {
            key: "number",
            head: "Order",
            names: true,
            place: "first",
            sort: sorted("number"),
            cell: (o) => <Link to={href("/studio/orders/:orderId", { orderId: o.id })}>{o.number}</Link>,
          },
          { key: "on", head: "Made", cell: (o) => o.on },
          { key: "buyer", head: "Buyer", place: "main", sort: sorted("buyer"), cell: (o) => o.buyer },
          { key: "copies", head: "Copies", cell: (o) => o.marks },
          {
            key: "stands",
            head: "Stands",
            cell: (o) =>
              o.attention === null ? STANDS_WORDS[o.stands] : <b>{STANDS_WORDS[o.stands]}, needs a look</b>,
          },
          {
            key: "total",
            head: "Total",
            numeric: true,
            place: "sum",
            sort: sorted("total"),
            cell: (o) => price(o.total, { currency: o.currency, language: "en" }),
          },
        ]}
      />
      {total > perPage ? (
        <Pager
          label="Pages of orders"
          words={`Orders ${first} to ${Math.min(first + perPage - 1, total)} of ${total}`}
          {...(wanted.page > 1
            ? { previous: { label: "Newer", to: address(wanted, { page: wanted.page - 1 }) } }
            : {})}
          {...(first + perPage - 1 < total
            ? { next: { label: "Further", to: address(wanted, { page: wanted.page + 1 }) } }
            : {})}
        />
      ) : null}
    </>
  );
}
