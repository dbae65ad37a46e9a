import { Form, href, Link, redirect } from "react-router";
import { NarrowSheet } from "~/components/account/narrow-sheet";
import { Press } from "~/components/ui/press";
import { visitorContext } from "~/context";
import { endSession } from "~/domain/people/sessions.server";
import { fill, useMessages } from "~/languages/messages";
import { signedOutCookie } from "~/middleware/session.server";
import type { Route } from "./+types/sign-out";

export const handle = { still: true };

export function loader({ context }: Route.LoaderArgs) {
  return { name: context.get(visitorContext)?.name ?? null };
}

export async function action({ context, params: { lang } }: Route.ActionArgs) {
  const visitor = context.get(visitorContext);
  if (visitor !== null) await endSession(visitor.sessionId);
  throw redirect(href("/:lang?/sign-out", { lang }), { headers: { "Set-Cookie": await signedOutCookie() } });
}

export default function SignOut({ loaderData: { name }, params: { lang } }: Route.ComponentProps) {
  const words = useMessages().account;
  return (
    <NarrowSheet title={words.signOut.title}>
      {name === null ? (
        <>
          <p>{words.signOut.notSignedIn}</p>
          <p>
            <Link to={href("/:lang?/sign-in", { lang })}>{words.signIn.title}</Link>
          </p>
        </>
      ) : (
        <Form method="post">
          <p>{fill(words.signOut.text, { name })}</p>
          <p className="form-acts">
            <Press>{words.signOut.press}</Press>
          </p>
        </Form>
      )}
    </NarrowSheet>
  );
}
