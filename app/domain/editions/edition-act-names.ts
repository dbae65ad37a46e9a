/** The acts of an edition's page, by what they are called in its address: `?act=prices`. */
export const ACTS = ["open", "prices", "release", "lower-limit", "close", "place", "correct"] as const;
export type Act = (typeof ACTS)[number];

/** Which act's form a press belongs to, so that it is shown again when it was refused. */
export function actOf(intent: unknown): Act | null {
  const name = typeof intent === "string" ? (intent.split(":")[0] ?? "") : "";
  if (name === "add-step" || name === "remove-step") return "prices";
  return ACTS.find((act) => act === name) ?? null;
}
