import { Form, href, Link } from "react-router";
import { Field } from "~/components/form/field";
import type { FormState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Press } from "~/components/ui/press";
import { segmentOf } from "~/languages/language";
import { useLanguage, useMessages } from "~/languages/messages";
import type { HeldForm } from "./held-form";

export type SignInFormProps = {
  form: FormState;
  /** Where to go afterwards: a path of ours. */
  next?: string;
  /** A form to be carried along and offered for sending afterwards. */
  held?: HeldForm | null;
};

/** E-mail address and password. */
export function SignInForm({ form, next, held }: SignInFormProps) {
  const words = useMessages().account;
  const lang = segmentOf(useLanguage());
  const busy = useBusy();
  return (
    <>
      <Problems form={form} />
      {/* A held form is answered with a page, not a redirect; the whole document goes, so that nothing is asked twice. */}
      <Form method="post" action={href("/:lang?/sign-in", { lang })} reloadDocument={Boolean(held)}>
        {next === undefined ? null : <input type="hidden" name="next" value={next} />}
        {held ? <input type="hidden" name="held" value={JSON.stringify(held)} /> : null}
        <div className="fields">
          <Field
            {...form.field("email")}
            label={words.email}
            type="email"
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
            required
          />
          <Field
            {...form.field("password")}
            defaultValue={undefined}
            label={words.password}
            type="password"
            autoComplete="current-password"
            required
          />
        </div>
        <p className="form-acts">
          <Press busy={busy}>{words.signIn.press}</Press>
          <Link to={href("/:lang?/forgotten", { lang })}>{words.signIn.forgotten}</Link>
        </p>
      </Form>
    </>
  );
}
