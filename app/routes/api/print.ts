import { publishedPrint } from "~/domain/prints/catalogue.server";
import { printForApi } from "~/domain/prints/public-api";
import { theStudio } from "~/domain/studio/studio.server";
import { problemJson, publicJson } from "~/platform/api-answers.server";
import type { Route } from "./+types/print";

export async function loader({ request, params }: Route.LoaderArgs) {
  const { currency } = await theStudio();
  const print = await publishedPrint(params.slug);
  if (print === null) return problemJson(404, "There is no print at this address");
  return publicJson(request, printForApi(print, currency));
}
