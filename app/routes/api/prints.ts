import { publishedPrints } from "~/domain/prints/catalogue.server";
import { printForApi } from "~/domain/prints/public-api";
import { theStudio } from "~/domain/studio/studio.server";
import { publicJson } from "~/platform/api-answers.server";
import type { Route } from "./+types/prints";

export async function loader({ request }: Route.LoaderArgs) {
  const { currency } = await theStudio();
  const prints = await publishedPrints();
  return publicJson(request, { prints: prints.map((p) => printForApi(p, currency)) });
}
