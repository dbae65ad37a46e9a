import { href, Outlet } from "react-router";
import { StudioLayout } from "~/components/layout/studio-layout";
import { signedInContext } from "~/context";
import { indexCounts } from "~/domain/studio/index-counts.server";
import { indexItems } from "~/domain/studio/index-items";
import { theStudio } from "~/domain/studio/studio.server";
import { requireCapability, requireRoutePermission, requireSignedIn } from "~/middleware/guards.server";
import { readTheme } from "~/middleware/theme.server";
import type { Route } from "./+types/layout";

export const middleware: Route.MiddlewareFunction[] = [
  requireSignedIn,
  requireCapability("studio.see"),
  requireRoutePermission,
];

// Also what makes every navigation within the studio ask the server, and so the guards.
export async function loader({ request, context }: Route.LoaderArgs) {
  const { name, roles } = context.get(signedInContext);
  const [studio, counts, theme] = await Promise.all([theStudio(), indexCounts(), readTheme(request)]);
  return {
    studioName: studio.name,
    zone: studio.zoneName === "" ? studio.zone.replaceAll("_", " ") : studio.zoneName,
    who: name,
    role: roles.filter((role) => role !== "collector").join(", "),
    items: indexItems(roles, counts),
    theme: theme ?? "day",
  };
}

export default function Studio({ loaderData }: Route.ComponentProps) {
  return (
    <StudioLayout
      {...loaderData}
      home={href("/:lang?")}
      themeAction={href("/theme")}
      signOutAction={href("/:lang?/sign-out")}
    >
      <Outlet />
    </StudioLayout>
  );
}
