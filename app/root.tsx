import {
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useMatches,
  useRouteLoaderData,
} from "react-router";
import { RootError } from "~/components/layout/root-error";
import { requestInfoContext } from "~/context";
import { LANGUAGE_TAG, type Language, languageOfSegment } from "~/languages/language";
import { originMiddleware } from "~/middleware/origin.server";
import { requestInfoMiddleware } from "~/middleware/request-info.server";
import { securityHeadersMiddleware } from "~/middleware/security-headers.server";
import { sessionMiddleware } from "~/middleware/session.server";
import { readTheme } from "~/middleware/theme.server";
import type { Route } from "./+types/root";
import "./app.css";

export const middleware: Route.MiddlewareFunction[] = [
  requestInfoMiddleware,
  securityHeadersMiddleware,
  originMiddleware,
  sessionMiddleware,
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const language: Language = languageOfSegment("lang" in params ? params.lang : undefined) ?? "en";
  return { nonce: context.get(requestInfoContext).nonce, theme: await readTheme(request), language };
}

/** A refusal thrown anywhere says when to come back, and this is where its page is made. */
export function headers({ errorHeaders }: Route.HeadersArgs): HeadersInit {
  const retryAfter = errorHeaders?.get("Retry-After");
  return retryAfter ? { "Retry-After": retryAfter } : {};
}

export function Layout({ children }: { children: React.ReactNode }) {
  const data = useRouteLoaderData<typeof loader>("root");
  // A page that needs no interaction says so in its handle and ships no script.
  const still = useMatches().some((m) => isStill(m.handle));
  // The browser hides nonces from scripts; an empty one on the client matches what it shows.
  const nonce = typeof document === "undefined" ? data?.nonce : "";
  return (
    <html lang={LANGUAGE_TAG[data?.language ?? "en"]} data-theme={data?.theme}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <link rel="icon" href="/favicon.svg" type="image/svg+xml" />
        <Meta />
        <Links nonce="" />
      </head>
      <body>
        {children}
        {still ? null : (
          <>
            <ScrollRestoration nonce={nonce} />
            <Scripts nonce={nonce} />
          </>
        )}
      </body>
    </html>
  );
}

function isStill(handle: unknown): boolean {
  return typeof handle === "object" && handle !== null && "still" in handle && handle.still === true;
}

export default function Root() {
  return <Outlet />;
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return <RootError error={error} />;
}
