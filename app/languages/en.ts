import { account } from "./en/account";
import { checkout } from "./en/checkout";
import { emails } from "./en/emails";
import { errors } from "./en/errors";
import { shop } from "./en/shop";

/** English: the language every other one is checked against. */
export const en = { shop, checkout, account, emails, errors };

/** The shape of a language: the same keys with words of its own. */
type Words<T> = { [K in keyof T]: T[K] extends string ? string : Words<T[K]> };
export type Messages = Words<typeof en>;
