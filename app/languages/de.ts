import { account } from "./de/account";
import { checkout } from "./de/checkout";
import { emails } from "./de/emails";
import { errors } from "./de/errors";
import { shop } from "./de/shop";

import type { Messages } from "./en";

/** German. A missing or surplus word is a type error. */
export const de = { shop, checkout, account, emails, errors } satisfies Messages;
