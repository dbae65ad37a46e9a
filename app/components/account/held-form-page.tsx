import { SignInForm } from "~/components/account/sign-in-form";
import { formState } from "~/components/form/form-state";
import { Press } from "~/components/ui/press";
import { count, useLanguage, useMessages } from "~/languages/messages";
import type { HeldForm } from "./held-form";
import { NarrowSheet } from "./narrow-sheet";

/** Shown in place of a page whose form was sent after the session had ended: sign in, and nothing is lost. */
export function SignedOutMeanwhile({ held }: { held: HeldForm }) {
  const words = useMessages().account.held;
  return (
    <NarrowSheet title={words.title}>
      <p>{words.text}</p>
      {held.incomplete ? <p className="note">{words.incomplete}</p> : null}
      <SignInForm form={formState(undefined)} next={held.action} held={held} />
    </NarrowSheet>
  );
}

/** After signing in again: the form as it was sent, ready to be sent with one press. */
export function SendHeldForm({ held }: { held: HeldForm }) {
  const words = useMessages().account.held;
  const language = useLanguage();
  const shown = held.fields.filter(([name, value]) => value !== "" && name !== "intent");
  return (
    <NarrowSheet title={words.readyTitle}>
      <p>{words.readyText}</p>
      <p className="quiet">{count(language, words.fields, shown.length)}</p>
      {held.incomplete ? <p className="note">{words.incomplete}</p> : null}
      <form method="post" action={held.action}>
        {held.fields.map(([name, value], at) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a name may be sent more than once, and the order never changes
          <input key={at} type="hidden" name={name} value={value} />
        ))}
        <p className="form-acts">
          <Press>{words.press}</Press>
          <a href={held.action}>{words.leave}</a>
        </p>
      </form>
    </NarrowSheet>
  );
}
