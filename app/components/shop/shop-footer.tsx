import { Form, href } from "react-router";
import { Press } from "~/components/ui/press";
import type { Messages } from "~/languages/en";

/** The colophon's columns: the studio, checking a print, what holds here. */
export function ShopFooter(props: {
  words: Messages["shop"];
  lang: string | undefined;
  address: { line1: string; line2?: string; city: string; postcode?: string };
  email: string;
}) {
  const { words, lang, address, email } = props;
  return [
    {
      title: words.theStudio,
      children: (
        <p>
          {[address.line1, address.line2, [address.city, address.postcode].filter(Boolean).join(" ")]
            .filter((line) => line !== undefined && line !== "")
            .map((line) => (
              <span key={line}>
                {line}
                <br />
              </span>
            ))}
          <a href={`mailto:${email}`}>{email}</a>
        </p>
      ),
    },
    {
      title: words.checkAPrint,
      children: (
        <Form action={href("/:lang?/check", { lang })} method="get">
          <div className="field">
            <label htmlFor="footer-code">{words.checkLabel}</label>
            <input
              className="input fig"
              id="footer-code"
              name="code"
              autoComplete="off"
              spellCheck={false}
              maxLength={40}
            />
          </div>
          <Press variant="outlined">{words.checkPress}</Press>
        </Form>
      ),
    },
    { title: words.whatHolds, children: <p>{words.whatHoldsText}</p> },
  ];
}
