import { Form, href, Link } from "react-router";
import { AddressFields } from "~/components/form/address-fields";
import { Field, TextArea } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { Select } from "~/components/form/select";
import { useBusy } from "~/components/form/use-busy";
import { BenchHead, Block } from "~/components/studio/bench";
import { CopyNumber, Money } from "~/components/ui/money";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import type { Address } from "~/domain/people/address";
import { ROLES, type Role } from "~/domain/people/permissions";
import type { FormProblem } from "~/platform/form-fields";

export type PartyPageProps = {
  party: {
    id: string;
    kind: "person" | "firm";
    name: string;
    email: string | null;
    telephone: string | null;
    address: Address | null;
    notes: string;
    createdAt: string;
    orders: readonly { id: string; number: number; state: string; madeOn: string; total: string }[];
    copies: readonly { copyId: string; editionId: string; mark: string; title: string; placement: string }[];
  };
  accounts: readonly {
    id: string;
    email: string;
    emailVerified: boolean;
    disabled: boolean;
    roles: readonly Role[];
    liveSessions: number;
    lastSeenAt: string | null;
  }[];
  countries: readonly { code: string; name: string }[];
  done: string | null;
  mayChange: boolean;
  problem?: FormProblem;
};

const DONE: Record<string, string> = {
  saved: "It has been saved.",
  "has-account": "There is an account with this address already: give it the role here.",
};

/** A person or firm in the book: details, accounts, orders, copies. */
export function PartyPage({ party, accounts, countries, done, mayChange, problem }: PartyPageProps) {
  const said = DONE[done ?? ""];
  const form = formState(problem?.answers.intent === "party" ? problem : undefined, {
    kind: party.kind,
    name: party.name,
    email: party.email,
    telephone: party.telephone,
    notes: party.notes,
    ...Object.fromEntries(
      Object.entries(party.address ?? {}).map(([part, value]) => [`address.${part}`, value]),
    ),
  });
  const others = formState(
    problem?.answers.intent === "party" ? undefined : problem,
    {},
    { form: "accounts" },
  );
  return (
    <>
      <title>{party.name}</title>
      <BenchHead
        title={party.name}
        says={`${party.kind === "firm" ? "A firm" : "A person"} in the book since ${party.createdAt}.`}
        acts={<Link to={href("/studio/people")}>All people</Link>}
      />
      <Problems form={form} />
      <Problems form={others} />
      {said ? <Notice kind={done === "saved" ? "done" : "note"} title={said} role="status" /> : null}
      <Block title="Accounts" id="accounts">
        {accounts.length === 0 ? <p className="quiet">This party has no account.</p> : null}
        {accounts.map((account) => (
          <Account key={account.id} account={account} mayChange={mayChange} />
        ))}
      </Block>
      <Block title="Details">
        <Details form={form} countries={countries} mayChange={mayChange} />
      </Block>
      <Block title="Orders" aside={`${party.orders.length}`}>
        <Orders rows={party.orders} />
      </Block>
      <Block title="Copies" aside={`${party.copies.length}`}>
        <Copies rows={party.copies} />
      </Block>
    </>
  );
}

function Account({
  account,
  mayChange,
}: {
  account: PartyPageProps["accounts"][number];
  mayChange: boolean;
}) {
  const missing = ROLES.filter((role) => !account.roles.includes(role));
  const state = account.disabled
    ? "disabled"
    : `${account.emailVerified ? "address confirmed" : "address not confirmed"}, ${account.liveSessions} live ${account.liveSessions === 1 ? "session" : "sessions"}`;
  return (
    <div className="flow">
      <p>
        <b>{account.email}</b> <span className="quiet">({state})</span>
        <br />
        <span className="quiet">
          {account.lastSeenAt === null ? "Not signed in at present." : `Last seen ${account.lastSeenAt}.`}
        </span>
      </p>
      {mayChange ? (
        <>
          <ul className="acts" aria-label={`Roles of ${account.email}`}>
            {account.roles.map((role) => (
              <li key={role}>
                <Form method="post" className="acts">
                  <input type="hidden" name="accountId" value={account.id} />
                  <input type="hidden" name="role" value={role} />
                  <span>{role}</span>
                  <Press
                    name="intent"
                    value="revoke"
                    variant="word"
                    aria-label={`Take away the role ${role}`}
                  >
                    take away
                  </Press>
                </Form>
              </li>
            ))}
          </ul>
          {missing.length === 0 ? null : (
            <Form method="post" className="filter-bar">
              <input type="hidden" name="accountId" value={account.id} />
              <Select
                name="role"
                id={`role-${account.id}`}
                label="Further role"
                blank="Choose a role"
                options={missing.map((role) => ({ value: role, label: role }))}
                required
              />
              <Press name="intent" value="grant" variant="outlined" small>
                Give the role
              </Press>
            </Form>
          )}
          <Form method="post" className="acts">
            <input type="hidden" name="accountId" value={account.id} />
            <Press name="intent" value="end-sessions" variant="outlined" small>
              Sign out everywhere
            </Press>
            <Press name="intent" value={account.disabled ? "enable" : "disable"} variant="outlined" small>
              {account.disabled ? "Enable the account" : "Disable the account"}
            </Press>
          </Form>
        </>
      ) : (
        <p>{account.roles.join(", ") || "no role"}</p>
      )}
    </div>
  );
}

type DetailsProps = {
  form: ReturnType<typeof formState>;
  countries: PartyPageProps["countries"];
  mayChange: boolean;
};

function Details({ form, countries, mayChange }: DetailsProps) {
  const busy = useBusy("party");
  return (
    <Form method="post" className="form-parts">
      <input type="hidden" name="intent" value="party" />
      <Fieldset legend="Who it is" columns={2}>
        <Select
          {...form.field("kind")}
          label="Kind"
          options={[
            { value: "person", label: "a person" },
            { value: "firm", label: "a firm" },
          ]}
        />
        <Field {...form.field("name")} label="Name" required />
        <Field {...form.field("email")} label="E-mail address" type="email" />
        <Field {...form.field("telephone")} label="Telephone" type="tel" />
        <TextArea
          {...form.field("notes")}
          label="Notes"
          hint="For the studio alone. Write nothing the party should not read: they may ask to."
          span
        />
      </Fieldset>
      <Fieldset legend="Address" columns={2} hint="Leave all of it empty if it is not known.">
        <AddressFields form={form} countries={countries} required={false} />
      </Fieldset>
      {mayChange ? (
        <p className="form-acts">
          <Press small busy={busy}>
            Save the details
          </Press>
        </p>
      ) : null}
    </Form>
  );
}

function Orders({ rows }: { rows: PartyPageProps["party"]["orders"] }) {
  if (rows.length === 0) return <p className="quiet">No order.</p>;
  return (
    <Table
      caption="Orders"
      rows={rows}
      rowKey={(row) => row.id}
      columns={[
        {
          key: "number",
          head: "Order",
          names: true,
          place: "main",
          cell: (row) => <Link to={href("/studio/orders/:orderId", { orderId: row.id })}>{row.number}</Link>,
        },
        { key: "made", head: "Made on", cell: (row) => row.madeOn },
        { key: "state", head: "State", cell: (row) => row.state.replaceAll("_", " ") },
        { key: "total", head: "Total", numeric: true, cell: (row) => <Money>{row.total}</Money> },
      ]}
    />
  );
}

function Copies({ rows }: { rows: PartyPageProps["party"]["copies"] }) {
  if (rows.length === 0) return <p className="quiet">No copy.</p>;
  return (
    <Table
      caption="Copies"
      rows={rows}
      rowKey={(row) => row.copyId}
      columns={[
        {
          key: "copy",
          head: "Copy",
          names: true,
          place: "main",
          cell: (row) => (
            <Link to={href("/studio/editions/:editionId", { editionId: row.editionId })}>
              <CopyNumber>{row.mark}</CopyNumber>
            </Link>
          ),
        },
        { key: "title", head: "Print", cell: (row) => row.title },
        { key: "placement", head: "Placement", cell: (row) => row.placement.replaceAll("_", " ") },
      ]}
    />
  );
}
