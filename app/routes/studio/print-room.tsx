import { href, redirect } from "react-router";
import { PrintRoomPage } from "~/components/studio/print-room-page";
import { signedInContext } from "~/context";
import { formatDay, isoDayInZone } from "~/domain/dates";
import { acting } from "~/domain/people/acting";
import { can } from "~/domain/people/permissions";
import { printRoomForm } from "~/domain/printroom/print-room-form";
import { sheetQueue } from "~/domain/printroom/queue.server";
import { workSheet } from "~/domain/printroom/work-sheets.server";
import { theStudio } from "~/domain/studio/studio.server";
import { formProblem, parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/print-room";

export async function loader({ context, url }: Route.LoaderArgs) {
  const { roles } = context.get(signedInContext);
  const [{ zone }, queue] = await Promise.all([theStudio(), sheetQueue()]);
  return {
    done: url.searchParams.get("done"),
    mayWork: can(roles, "printroom.work"),
    mayOrders: can(roles, "orders.see"),
    sheets: queue.map(({ owedSince, ...sheet }) => ({
      ...sheet,
      owedOn: formatDay(isoDayInZone(owedSince, zone), "en-GB"),
    })),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await parseForm(request, printRoomForm);
  if (!form.ok) return formProblem(form);
  const { intent, sheetId, ...rest } = form.value;
  const act =
    "reason" in rest
      ? { kind: "spoiled" as const, ...rest }
      : { kind: intent as "printed" | "signed" | "packed" };
  const outcome = await workSheet(sheetId, acting(context.get(signedInContext)), act);
  if (outcome.kind === "refused") return formProblem(form, { form: [outcome.sentence] });
  throw redirect(`${href("/studio/print-room")}?done=${intent}`);
}

export default function PrintRoom({ loaderData, actionData }: Route.ComponentProps) {
  return <PrintRoomPage {...loaderData} problem={actionData?.problem} />;
}
