import { href, isRouteErrorResponse, useLocation } from "react-router";
import { heldFormIn } from "~/components/account/held-form";
import { SignedOutMeanwhile } from "~/components/account/held-form-page";
import { ErrorPage } from "~/components/layout/error-page";
import { Window } from "~/components/ui/window";
import { segmentOf } from "~/languages/language";
import { useLanguage, useMessages } from "~/languages/messages";
import { type AppErrorCode, appErrorCode } from "~/platform/errors";

function codeOf(error: unknown): AppErrorCode | "bug" {
  if (!isRouteErrorResponse(error)) return "bug";
  const code = appErrorCode(error.data);
  if (code !== null) return code;
  if (error.status === 404 || error.status === 405) return "not_found";
  if (error.status === 403) return "not_allowed";
  return error.status < 500 ? "bad_request" : "bug";
}

/** The page shown instead of one that cannot be: what happened, and the next step. */
export function RootError({ error }: { error: unknown }) {
  const words = useMessages().errors;
  const lang = segmentOf(useLanguage());
  const { pathname, search } = useLocation();
  const pages: Record<AppErrorCode | "bug", [title: string, text: string]> = {
    not_found: [words.notFoundTitle, words.notFoundText],
    not_allowed: [words.notAllowedTitle, words.notAllowedText],
    sign_in_needed: [words.signInTitle, words.signInText],
    too_many: [words.tooManyTitle, words.tooManyText],
    bad_request: [words.badRequestTitle, words.badRequestText],
    unavailable: [words.unavailableTitle, words.unavailableText],
    gone: [words.goneTitle, words.goneText],
    bug: [words.bugTitle, words.bugText],
  };
  const [title, text] = pages[codeOf(error)];
  const signIn = codeOf(error) === "sign_in_needed";
  const held = signIn && isRouteErrorResponse(error) ? heldFormIn(error.data) : null;
  if (held !== null) {
    return (
      <main id="content" className="page">
        <SignedOutMeanwhile held={held} />
      </main>
    );
  }
  const onward = signIn
    ? {
        label: words.signIn,
        to: `${href("/:lang?/sign-in", { lang })}?next=${encodeURIComponent(pathname + search)}`,
      }
    : { label: words.toPrints, to: href("/:lang?/prints", { lang }) };
  return (
    <main id="content" className="page">
      <title>{title}</title>
      <Window>
        <ErrorPage
          title={title}
          text={<p className="lead">{text}</p>}
          actions={[onward, { label: words.home, to: href("/:lang?", { lang }) }]}
        />
      </Window>
    </main>
  );
}
