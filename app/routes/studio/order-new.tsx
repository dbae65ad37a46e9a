import { href, redirect } from "react-router";
import { OrderByHandPage } from "~/components/studio/order-by-hand-page";
import { signedInContext } from "~/context";
import { handChoices, partyChoices } from "~/domain/orders/hand-order-choices.server";
import { orderByHand } from "~/domain/orders/order-by-hand.server";
import { handAddress, orderByHandForm } from "~/domain/orders/studio-forms";
import { acting } from "~/domain/people/acting";
import type { Address } from "~/domain/people/address";
import { countriesByName } from "~/domain/people/countries";
import { can } from "~/domain/people/permissions";
import { theStudio } from "~/domain/studio/studio.server";
import { messagesOf } from "~/languages/messages";
import { now } from "~/platform/clock";
import { formProblem, parseForm } from "~/platform/forms.server";
import { newId } from "~/platform/ids.server";
import { currencyCode, parseMoney } from "~/platform/money";
import type { Route } from "./+types/order-new";

export async function loader({ context }: Route.LoaderArgs) {
  const [studio, choices, parties] = await Promise.all([theStudio(), handChoices(), partyChoices()]);
  return {
    submissionKey: newId(),
    currency: studio.currency,
    home: studio.country,
    choices,
    parties,
    countries: countriesByName("en-GB"),
    mayReduce: can(context.get(signedInContext).roles, "reductions.make"),
  };
}

export async function action({ request, context }: Route.ActionArgs) {
  const studio = await theStudio();
  const form = await parseForm(request, orderByHandForm);
  if (!form.ok) return formProblem(form);
  const { value } = form;
  let address: Address | null = null;
  if (value.method === "delivery") {
    const checked = handAddress.safeParse(value.address);
    if (!checked.success) {
      const words: Record<string, string> = messagesOf("en").account.addressProblems;
      return formProblem(
        form,
        Object.fromEntries(
          checked.error.issues.map((i) => [`address.${i.path.join(".")}`, [words[i.message] ?? i.message]]),
        ),
      );
    }
    address = checked.data;
  }
  const lines = [];
  for (const [index, line] of value.lines.entries()) {
    const reduction =
      line.reduction === "" ? null : parseMoney(line.reduction, currencyCode(studio.currency));
    if (reduction !== null && !reduction.ok) {
      return formProblem(form, {
        [`lines[${index}].reduction`]: ["Write the reduction as a sum, for example 20.00."],
      });
    }
    lines.push({
      formatId: line.formatId,
      number: line.number === "" ? null : Number(line.number),
      reductionAmount: reduction?.money.amount ?? 0,
      reductionReason: line.reason,
    });
  }
  const until = new Date(now().getTime() + Number(value.days) * 86_400_000);
  const outcome = await orderByHand(
    {
      submissionKey: value.submissionKey,
      lines,
      buyer:
        value.partyId === null
          ? {
              name: value.name,
              email: value.email,
              telephone: value.telephone === "" ? null : value.telephone,
            }
          : { partyId: value.partyId },
      delivery:
        address === null
          ? { method: value.method === "collection" ? "collection" : "handed_over" }
          : { method: "delivery", address },
      country: value.address.country,
      language: "en",
      studioNote: value.studioNote,
      payment:
        value.payment === "cash"
          ? { method: "cash", receipt: value.receipt }
          : { method: value.payment, until },
    },
    acting(context.get(signedInContext)),
  );
  switch (outcome.kind) {
    case "placed":
      throw redirect(`${href("/studio/orders/:orderId", { orderId: outcome.orderId })}?done=made`);
    case "gone": {
      const gone = lines.findIndex((l) => outcome.formatIds.includes(l.formatId));
      return formProblem(form, {
        [`lines[${Math.max(gone, 0)}].number`]: [
          "This number is not in hand any more. Choose another, or leave it empty for the lowest free one.",
        ],
      });
    }
    case "not_delivered":
      return formProblem(form, {
        "address.country": [
          "The studio's delivery prices do not reach this country or weight. Hand it over, or add a price in the settings.",
        ],
      });
    case "empty":
      return formProblem(form, { "lines[0].formatId": ["Choose an edition and its format."] });
  }
}

export default function OrderNew({ loaderData, actionData }: Route.ComponentProps) {
  return <OrderByHandPage {...loaderData} problem={actionData?.problem} />;
}
