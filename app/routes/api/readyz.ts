import { readiness } from "~/domain/studio/readiness.server";

/** Whether the shop can do its work: 503 with the failing parts named. */
export async function loader() {
  const state = await readiness();
  return Response.json(state, { status: state.ready ? 200 : 503, headers: { "Cache-Control": "no-store" } });
}
