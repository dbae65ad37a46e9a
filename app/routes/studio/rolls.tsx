import { href } from "react-router";
import { BenchHead } from "~/components/studio/bench";
import { RollTable } from "~/components/studio/roll-table";
import { useLookAgain } from "~/components/studio/roll-uploads";
import { PressLink } from "~/components/ui/press";
import { signedInContext } from "~/context";
import { can } from "~/domain/people/permissions";
import { rollList } from "~/domain/rolls/roll-list.server";
import type { Route } from "./+types/rolls";

export async function loader({ context }: Route.LoaderArgs) {
  return {
    rolls: await rollList(),
    mayChange: can(context.get(signedInContext).roles, "rolls.change"),
  };
}

export default function Rolls({ loaderData: { rolls, mayChange } }: Route.ComponentProps) {
  useLookAgain(rolls.some((roll) => roll.pending > 0));
  return (
    <>
      <title>Rolls</title>
      <BenchHead
        title="Rolls"
        says="One film each, with the scans of its frames."
        acts={
          mayChange ? (
            <PressLink variant="filled" small to={href("/studio/rolls/new")}>
              Make a roll
            </PressLink>
          ) : null
        }
      />
      <RollTable rolls={rolls} mayChange={mayChange} />
    </>
  );
}
