import { openApiDescription } from "~/domain/prints/public-api";
import { publicJson } from "~/platform/api-answers.server";
import { env } from "~/platform/env.server";
import type { Route } from "./+types/openapi";

export function loader({ request }: Route.LoaderArgs) {
  return publicJson(request, openApiDescription(env.BASE_URL));
}
