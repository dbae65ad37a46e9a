import { Field } from "~/components/form/field";
import { Fieldset } from "~/components/form/fieldset";
import type { FormState } from "~/components/form/form-state";
import { CountrySelect } from "~/components/form/select";
import { Press } from "~/components/ui/press";
import { needsPostcode, needsRegion, postcodeExample } from "~/domain/people/address";
import { fill, useMessages } from "~/languages/messages";

/**
 * Where the parcel goes. The country comes first: it decides the sums, and what an address there needs. Hidden by
 * style alone while the print is to be collected, so that changing one's mind loses nothing.
 */
export function CheckoutAddress(props: {
  form: FormState;
  country: string;
  countries: readonly { code: string; name: string }[];
  /** Why nothing can be sent to the country, where that is so. */
  notDelivered: string | null;
  onCountry: (country: string) => void;
}) {
  const { form, country } = props;
  const { checkout, account } = useMessages();
  const words = account.address;
  const example = postcodeExample(country);
  const error = form.error("address.country") ?? props.notDelivered ?? undefined;
  return (
    <div className="where-it-goes">
      <Fieldset legend={checkout.whereTitle} columns={2}>
        <CountrySelect
          name="address.country"
          id="address.country"
          label={checkout.country}
          autoComplete="shipping country"
          countries={props.countries}
          value={form.value("address.country") ?? country}
          error={error}
          onChange={(event) => props.onCountry(event.currentTarget.value)}
          span
          required
        />
        <div className="span reckon">
          <Press variant="outlined" small name="intent" value="reckon" formNoValidate>
            {checkout.reckon}
          </Press>
          <p className="note">{checkout.reckonHint}</p>
        </div>
        <Field
          {...form.field("address.line1")}
          label={words.line1}
          autoComplete="shipping address-line1"
          required
          span
        />
        <Field
          {...form.field("address.line2")}
          label={words.line2}
          autoComplete="shipping address-line2"
          span
        />
        <Field
          {...form.field("address.postcode")}
          label={words.postcode}
          hint={example === null ? undefined : fill(checkout.postcodeLike, { example })}
          autoComplete="shipping postal-code"
          required={needsPostcode(country)}
        />
        <Field
          {...form.field("address.city")}
          label={words.city}
          autoComplete="shipping address-level2"
          required
        />
        {needsRegion(country) || form.error("address.region") !== undefined ? (
          <Field
            {...form.field("address.region")}
            label={words.region}
            autoComplete="shipping address-level1"
            required={needsRegion(country)}
            span
          />
        ) : null}
        <Field
          {...form.field("address.name")}
          label={checkout.parcelName}
          hint={checkout.parcelNameHint}
          autoComplete="shipping name"
          span
        />
      </Fieldset>
    </div>
  );
}
