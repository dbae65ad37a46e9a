import { planning } from "~/domain/editions/plan-edition.server";
import type { Answers } from "~/platform/form-fields";
import { isUuid } from "~/platform/uuid";
import type { Route } from "./+types/edition-figures";

/** Far more than any plan says. */
const LONGEST = 30_000;

/** The figures of a plan as far as it goes, asked for while its form is filled in. */
export async function loader({ request }: Route.LoaderArgs) {
  const { searchParams, search } = new URL(request.url);
  const printId = searchParams.get("printId");
  const editionId = searchParams.get("id");
  if (!isUuid(printId) || search.length > LONGEST) return Response.json({ figures: null });
  const answers: Answers = Object.fromEntries(searchParams);
  const plan = await planning(printId, answers, isUuid(editionId) ? editionId : null);
  return Response.json({ figures: plan?.figures ?? null }, { headers: { "Cache-Control": "no-store" } });
}
