import { Form, href, Link } from "react-router";
import { Field } from "~/components/form/field";
import { formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { BenchHead, Block } from "~/components/studio/bench";
import { EmptyState } from "~/components/ui/empty-state";
import { Making } from "~/components/ui/making";
import { CopyNumber } from "~/components/ui/money";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { MAKING_WORDS } from "~/domain/editions/transitions";
import type { QueuedSheet } from "~/domain/printroom/queue.server";
import type { FormProblem } from "~/platform/form-fields";

export type RoomSheet = Omit<QueuedSheet, "owedSince"> & { owedOn: string };

export type PrintRoomPageProps = {
  sheets: readonly RoomSheet[];
  done: string | null;
  mayWork: boolean;
  mayOrders: boolean;
  problem?: FormProblem | undefined;
};

const DONE: Record<string, string> = {
  printed: "Recorded as printed.",
  signed: "Recorded as numbered and signed.",
  packed: "Recorded as packed.",
  spoiled: "Recorded as spoiled; its number is to be printed again.",
};

const STEPS = [
  { making: "to_print", title: "To print", act: { intent: "printed", label: "Printed" } },
  { making: "printed", title: "To check, number and sign", act: { intent: "signed", label: "Signed" } },
  { making: "signed", title: "To pack", act: { intent: "packed", label: "Packed" } },
  { making: "packed", title: "Packed, to be sent from the order", act: null },
] as const;

/** The queue of sheets to be printed, checked and signed, grouped by what is to be done and by paper. */
export function PrintRoomPage({ sheets, done, mayWork, mayOrders, problem }: PrintRoomPageProps) {
  const form = formState(problem, {}, { form: "main" });
  const said = DONE[done ?? ""];
  const toPrint = sheets.filter((s) => s.making === "to_print").length;
  return (
    <>
      <title>Print room</title>
      <BenchHead
        title="Print room"
        says={
          sheets.length === 0
            ? "Nothing waits."
            : `${toPrint} to print, ${sheets.length - toPrint} to check, sign, pack or send.`
        }
      />
      <Problems form={form} />
      {said ? <Notice kind="done" title={said} role="status" /> : null}
      {sheets.length === 0 ? <EmptyState>Sheets stand here as soon as an order is paid.</EmptyState> : null}
      {STEPS.map(({ making, title, act }) => {
        const own = sheets.filter((s) => s.making === making);
        if (own.length === 0) return null;
        return (
          <Block key={making} title={title} aside={`${own.length}`}>
            <Table
              caption={title}
              variant="dense"
              rows={own}
              rowKey={(s) => s.sheetId}
              columns={[
                { key: "copy", head: "Copy", place: "first", cell: (s) => <CopyNumber>{s.mark}</CopyNumber> },
                {
                  key: "print",
                  head: "Print",
                  names: true,
                  place: "main",
                  cell: (s) => (
                    <Link to={href("/studio/editions/:editionId", { editionId: s.editionId })}>
                      {s.title}
                      {s.picture.of > 1 ? `, picture ${s.picture.position} of ${s.picture.of}` : ""}
                      {s.serial > 1 ? `, sheet ${s.serial}` : ""}
                    </Link>
                  ),
                },
                { key: "paper", head: "Paper", cell: (s) => s.paper },
                {
                  key: "size",
                  head: "Image, sheet (mm)",
                  cell: (s) => `${s.image.width} × ${s.image.height}, ${s.sheet.width} × ${s.sheet.height}`,
                },
                { key: "owed", head: "Owed since", says: true, cell: (s) => s.owedOn },
                {
                  key: "order",
                  head: "Order",
                  says: true,
                  cell: (s) =>
                    s.orderId === null || !mayOrders ? (
                      (s.orderNumber ?? "")
                    ) : (
                      <Link to={href("/studio/orders/:orderId", { orderId: s.orderId })}>
                        {s.orderNumber}
                      </Link>
                    ),
                },
                {
                  key: "making",
                  head: "Making",
                  cell: (s) => <Making making={s.making} words={MAKING_WORDS[s.making]} />,
                },
                {
                  key: "act",
                  head: "Record",
                  headHidden: true,
                  cell: (s) => (mayWork ? <Acts sheet={s} act={act} form={form} /> : null),
                },
              ]}
            />
          </Block>
        );
      })}
      <p className="note">
        Blades: cut away from your hand, with a guarded straightedge and a fresh blade. Spray and varnish:
        open air or extraction only, no flame, and a suitable respirator. Read the maker’s safety sheet.
      </p>
    </>
  );
}

function Acts({
  sheet,
  act,
  form,
}: {
  sheet: RoomSheet;
  act: { intent: string; label: string } | null;
  form: ReturnType<typeof formState>;
}) {
  const here = form.value("sheetId") === sheet.sheetId;
  const id = `reason-${sheet.sheetId}`;
  return (
    <div className="acts">
      {act === null ? null : (
        <Form method="post" preventScrollReset>
          <input type="hidden" name="intent" value={act.intent} />
          <input type="hidden" name="sheetId" value={sheet.sheetId} />
          <Press variant="outlined" small>
            {act.label}
            <span className="vh">
              {" "}
              {sheet.mark} {sheet.title}
            </span>
          </Press>
        </Form>
      )}
      <details open={here || undefined}>
        <summary>
          Spoiled
          <span className="vh">
            {" "}
            {sheet.mark} {sheet.title}
          </span>
        </summary>
        <Form method="post" preventScrollReset>
          <input type="hidden" name="intent" value="spoiled" />
          <input type="hidden" name="sheetId" value={sheet.sheetId} />
          <Field
            id={id}
            label="What is wrong with it"
            name="reason"
            error={here ? form.error("reason") : undefined}
            defaultValue={here ? form.value("reason") : undefined}
          />
          <Field
            id={`fate-${sheet.sheetId}`}
            label="What became of it"
            name="fate"
            hint="Torn, kept as a test strip"
            defaultValue={here ? form.value("fate") : undefined}
          />
          <Press variant="outlined" small>
            Record as spoiled
          </Press>
        </Form>
      </details>
    </div>
  );
}
