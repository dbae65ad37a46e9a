import { z } from "zod";
import { printOfEdition } from "~/domain/prints/catalogue.server";
import { editionForApi } from "~/domain/prints/public-api";
import { theStudio } from "~/domain/studio/studio.server";
import { problemJson, publicJson } from "~/platform/api-answers.server";
import type { Route } from "./+types/edition";

export async function loader({ request, params }: Route.LoaderArgs) {
  if (!z.uuid().safeParse(params.id).success) return problemJson(404, "There is no edition at this address");
  const { currency } = await theStudio();
  const print = await printOfEdition(params.id);
  const edition = print?.editions.find((e) => e.id === params.id);
  if (print === null || edition === undefined) return problemJson(404, "There is no edition at this address");
  return publicJson(request, editionForApi(edition, print.slug, currency));
}
