import { allowedCopyTransition, type CopyPlacement } from "./transitions";

/** What the studio can do with a copy by hand. */
export const HAND_ACTS = [
  "set_aside",
  "released_from_set_aside",
  "given",
  "kept",
  "no_longer_kept",
  "retired",
] as const;
export type HandAct = (typeof HAND_ACTS)[number];

/** The acts on the studio's screens. */
export const HAND_ACT_WORDS: Record<HandAct, { name: string; more: string }> = {
  set_aside: {
    name: "Set aside",
    more: "for a fair, an exhibition or a person; it is not for sale meanwhile",
  },
  released_from_set_aside: { name: "Put back in hand", more: "no longer set aside: it can be bought again" },
  given: { name: "Give", more: "to somebody, without a sale; from then on the number counts as issued" },
  kept: { name: "Keep", more: "it stays with the studio" },
  no_longer_kept: { name: "Keep no longer", more: "back in hand: it can be bought" },
  retired: { name: "Retire", more: "for good: a retired number is never issued again" },
};

/** Whether a copy can be reached by any of the acts from where it stands. */
export function canBePlaced(placement: CopyPlacement): boolean {
  return HAND_ACTS.some((act) => !("refused" in allowedCopyTransition(act, placement)));
}
