import { data, href, redirect } from "react-router";
import { z } from "zod";
import { safePath } from "~/domain/people/next-path";
import { themeCookie } from "~/middleware/theme.server";
import { parseForm } from "~/platform/forms.server";
import type { Route } from "./+types/theme";

const themeForm = z.object({ theme: z.enum(["day", "safelight"]), from: z.string().max(2_000).optional() });

/** Keeps the browser's wish for daylight or the safelight, and goes back to where it was made. */
export async function action({ request }: Route.ActionArgs) {
  const form = await parseForm(request, themeForm);
  if (!form.ok) throw data(null, { status: 400 });
  const { theme, from } = form.value;
  throw redirect(safePath(from) ?? href("/studio"), {
    headers: { "Set-Cookie": await themeCookie.serialize(theme) },
  });
}
