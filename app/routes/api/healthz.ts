/** Whether this process runs; asks nothing else. */
export function loader() {
  return Response.json({ ok: true }, { headers: { "Cache-Control": "no-store" } });
}
