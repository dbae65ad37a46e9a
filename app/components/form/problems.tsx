import { FormErrorSummary } from "~/components/form/form-error-summary";
import type { FormState } from "~/components/form/form-state";
import { count, useLanguage, useMessages } from "~/languages/messages";

/** The summary of what is wrong with a form, with its title in the page's language. Draws nothing when all is well. */
export function Problems({ form }: { form: FormState }) {
  const language = useLanguage();
  const { needLook } = useMessages().errors;
  return <FormErrorSummary errors={form.summary} title={count(language, needLook, form.summary.length)} />;
}
