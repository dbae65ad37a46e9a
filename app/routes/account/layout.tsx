import { Outlet } from "react-router";
import { requireRoutePermission, requireSignedIn } from "~/middleware/guards.server";
import type { Route } from "./+types/layout";

export const middleware: Route.MiddlewareFunction[] = [requireSignedIn, requireRoutePermission];

// Makes every navigation within the account ask the server, and so the guards.
export function loader() {
  return null;
}

export default function Account() {
  return <Outlet />;
}
