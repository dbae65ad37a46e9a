import { Form, href, Link } from "react-router";
import { Field } from "~/components/form/field";
import { FilterBar } from "~/components/form/filter-bar";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { Select } from "~/components/form/select";
import { useBusy } from "~/components/form/use-busy";
import { BenchHead, Block } from "~/components/studio/bench";
import { EmptyState } from "~/components/ui/empty-state";
import { Notice } from "~/components/ui/notice";
import { Pager } from "~/components/ui/pager";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { ROLES, type Role } from "~/domain/people/permissions";
import type { FormProblem } from "~/platform/form-fields";

export type PeopleView = {
  q: string;
  done: string | null;
  mayChange: boolean;
  accounts: readonly {
    id: string;
    partyId: string;
    name: string;
    email: string;
    roles: readonly Role[];
    disabled: boolean;
    lastSeenAt: string | null;
  }[];
  invitations: readonly {
    id: string;
    name: string;
    email: string;
    role: Role;
    until: string;
    expired: boolean;
  }[];
  parties: {
    rows: readonly {
      id: string;
      kind: "person" | "firm";
      name: string;
      email: string | null;
      country: string | null;
      roles: readonly Role[];
      orders: number;
      copies: number;
    }[];
    total: number;
    page: number;
    pages: number;
  };
};

const DONE: Record<string, string> = {
  invited: "The invitation is on its way.",
  withdrawn: "The invitation has been withdrawn; its link no longer works.",
  resent: "The invitation has been sent again with a new link.",
};

/** Who works here, who is invited, and everybody in the book. */
export function PeoplePage({ people, problem }: { people: PeopleView; problem?: FormProblem }) {
  const done = DONE[people.done ?? ""];
  const form = formState(problem, {}, { form: "email" });
  return (
    <>
      <title>People</title>
      <BenchHead title="People" says="Who works here, and every party in the book." />
      <Problems form={form} />
      {done ? <Notice kind="done" title={done} role="status" /> : null}
      <Block title="Accounts" aside={`${people.accounts.length}`}>
        <Accounts rows={people.accounts} />
      </Block>
      {people.mayChange ? (
        <Block title="Invitations">
          <Invitations rows={people.invitations} />
          {/* A new invitation makes a new, empty form. */}
          <InviteForm key={people.invitations[0]?.id} form={form} />
        </Block>
      ) : null}
      <Block title="Parties of the book" aside={`${people.parties.total}`}>
        <Parties q={people.q} parties={people.parties} />
      </Block>
    </>
  );
}

function Accounts({ rows }: { rows: PeopleView["accounts"] }) {
  return (
    <Table
      caption="Accounts of those who work with the studio"
      rows={rows}
      rowKey={(row) => row.id}
      columns={[
        {
          key: "name",
          head: "Name",
          names: true,
          place: "main",
          cell: (row) => <Link to={href("/studio/people/:partyId", row)}>{row.name}</Link>,
        },
        { key: "email", head: "E-mail", cell: (row) => row.email },
        { key: "roles", head: "Roles", cell: (row) => row.roles.join(", ") || "none" },
        {
          key: "seen",
          head: "Last seen",
          cell: (row) => (row.disabled ? "disabled" : (row.lastSeenAt ?? "not signed in")),
        },
      ]}
    />
  );
}

function Invitations({ rows }: { rows: PeopleView["invitations"] }) {
  if (rows.length === 0) return <p className="quiet">Nobody is invited at present.</p>;
  return (
    <Table
      caption="Open invitations"
      rows={rows}
      rowKey={(row) => row.id}
      columns={[
        { key: "name", head: "Name", names: true, place: "main", cell: (row) => row.name },
        { key: "email", head: "E-mail", cell: (row) => row.email },
        { key: "role", head: "As", cell: (row) => row.role },
        {
          key: "until",
          head: "Holds until",
          cell: (row) => (row.expired ? `ran out on ${row.until}` : row.until),
        },
        {
          key: "acts",
          head: "What to do",
          headHidden: true,
          cell: (row) => (
            <Form method="post" className="acts">
              <input type="hidden" name="invitationId" value={row.id} />
              <Press name="intent" value="resend" variant="word" aria-label={`Send again to ${row.name}`}>
                Send again
              </Press>
              <Press name="intent" value="withdraw" variant="word" aria-label={`Withdraw from ${row.name}`}>
                Withdraw
              </Press>
            </Form>
          ),
        },
      ]}
    />
  );
}

function InviteForm({ form }: { form: ReturnType<typeof formState> }) {
  const busy = useBusy("invite");
  return (
    <Form method="post">
      <input type="hidden" name="intent" value="invite" />
      <div className="fields fields-2">
        <Field {...form.field("name")} label="Name" autoComplete="off" required />
        <Field {...form.field("email")} label="E-mail address" type="email" autoComplete="off" required />
        <Select
          {...form.field("role")}
          label="As"
          blank="Choose a role"
          options={ROLES.map((role) => ({ value: role, label: role }))}
          required
        />
      </div>
      <p className="form-acts">
        <Press small busy={busy}>
          Invite
        </Press>
        <span className="note">They get a link with which they choose a password. It holds for 14 days.</span>
      </p>
    </Form>
  );
}

function pageAddress(q: string, page: number): string {
  const search = new URLSearchParams({
    ...(q === "" ? {} : { q }),
    ...(page === 1 ? {} : { page: `${page}` }),
  });
  return search.size === 0 ? href("/studio/people") : `${href("/studio/people")}?${search}`;
}

function Parties({ q, parties }: { q: string; parties: PeopleView["parties"] }) {
  const { rows, total, page, pages } = parties;
  return (
    <>
      <FilterBar
        label="Find parties"
        submit="Find"
        clear={q === "" ? null : <Link to={href("/studio/people")}>Show all</Link>}
      >
        <Field name="q" label="Name, e-mail, town or note" defaultValue={q} type="search" />
      </FilterBar>
      <Table
        caption="Parties of the book"
        variant="dense"
        rows={rows}
        rowKey={(row) => row.id}
        empty={
          <EmptyState>
            {q === ""
              ? "Buyers, owners and galleries stand here once there are any."
              : `Nothing is found for “${q}”.`}
          </EmptyState>
        }
        columns={[
          {
            key: "name",
            head: "Name",
            names: true,
            place: "main",
            cell: (row) => <Link to={href("/studio/people/:partyId", { partyId: row.id })}>{row.name}</Link>,
          },
          { key: "kind", head: "Kind", cell: (row) => row.kind },
          { key: "email", head: "E-mail", cell: (row) => row.email ?? "" },
          { key: "country", head: "Country", cell: (row) => row.country ?? "" },
          { key: "roles", head: "Account as", cell: (row) => row.roles.join(", ") },
          { key: "orders", head: "Orders", numeric: true, says: true, cell: (row) => row.orders },
          { key: "copies", head: "Copies", numeric: true, says: true, cell: (row) => row.copies },
        ]}
      />
      {pages > 1 ? (
        <Pager
          label="Pages of parties"
          words={`Page ${page} of ${pages}, ${total} parties`}
          previous={page > 1 ? { label: "Earlier names", to: pageAddress(q, page - 1) } : undefined}
          next={page < pages ? { label: "Later names", to: pageAddress(q, page + 1) } : undefined}
        />
      ) : null}
    </>
  );
}
