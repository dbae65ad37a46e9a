/**
 * One account for every role of the demo, printed by `npm start` and made by the seed. They exist in no other mode.
 *
 * @type {{ role: "photographer" | "assistant" | "printer" | "stockist" | "bookkeeper" | "collector", name: string, email: string, password: string }[]}
 */
export const DEMO_LOGINS = [
  {
    role: "photographer",
    name: "Sunniva Harcastle",
    email: "sunniva@harcastle.example",
    password: "vale-of-ember-photographer",
  },
  {
    role: "assistant",
    name: "Odalric Fenn",
    email: "odalric@harcastle.example",
    password: "vale-of-ember-assistant",
  },
  {
    role: "printer",
    name: "Perpetua Lund",
    email: "perpetua@millrace-press.example",
    password: "vale-of-ember-printer",
  },
  {
    role: "stockist",
    name: "Ansgar Tolley",
    email: "ansgar@lockside-gallery.example",
    password: "vale-of-ember-stockist",
  },
  {
    role: "bookkeeper",
    name: "Wilmot Assheton",
    email: "wilmot@assheton-ledgers.example",
    password: "vale-of-ember-bookkeeper",
  },
  {
    role: "collector",
    name: "Merrin Oakshade",
    email: "merrin@oakshade.example",
    password: "vale-of-ember-collector",
  },
];
