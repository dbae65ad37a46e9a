import { Form, href } from "react-router";
import { Field } from "~/components/form/field";
import { Press } from "~/components/ui/press";
import { segmentOf } from "~/languages/language";
import { useLanguage, useMessages } from "~/languages/messages";

/** Where a check code is typed in. It becomes a part of the address: nothing of it is a secret. */
export function CheckForm({ typed, error }: { typed: string; error?: string }) {
  const { shop, checkout } = useMessages();
  const lang = segmentOf(useLanguage());
  return (
    <Form action={href("/:lang?/check", { lang })} method="get" className="ask">
      <Field
        name="code"
        label={shop.checkLabel}
        hint={checkout.check.codeHint}
        defaultValue={typed}
        autoComplete="off"
        spellCheck={false}
        maxLength={40}
        {...(error === undefined ? {} : { error })}
      />
      <Press variant={typed === "" || error !== undefined ? "filled" : "outlined"}>{shop.checkPress}</Press>
    </Form>
  );
}
