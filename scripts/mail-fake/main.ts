/*
 * A mail server for this machine that keeps what it is given and passes nothing on:
 * `node --import tsx scripts/mail-fake/main.ts`.
 *
 * Environment
 *   SMTP_PORT        3004; where mail is handed in, with any credentials or none
 *   MAIL_PORT        3003; where it is read
 *   HOST             127.0.0.1
 *   DATA_DIR         .data; the messages are in DATA_DIR/mail and outlive restarts and kill -9
 *   NUMBERLEAF_MODE  with `production` it refuses to start
 *
 * Reading
 *   GET    /                          for a person: newest first, with a search
 *   GET    /messages?to=ADDRESS       JSON, newest first: {id, from, to, subject, text, html, headers, receivedAt,
 *                                     attachments}. `to` lists the recipients of the envelope; `headers` go by
 *                                     lower-case name; `text` and `html` are null where none was sent.
 *          &wait=MS&count=N           answers only once there are N (default 1) of them, or the time is up
 *          &limit=N
 *   GET    /messages/:id.json         one of them
 *   GET    /messages/:id/source       the .eml itself
 *   DELETE /messages                  all, or with ?to=ADDRESS those of an address
 *
 * Switches, for tests; forgotten at a restart
 *   GET  /-/health      {ok}
 *   GET  /-/switches    how they stand
 *   POST /-/switches    only what is to change; {"reset": true} first puts everything back
 *     {"failNext": 1,        the next n messages are refused after they have been handed in ...
 *      "failCode": 451,      ... with this code (4xx: try again, 5xx: never)
 *      "loseReplyNext": 1,   the next n are kept, but the connection is cut before that is said
 *      "delayMs": 0,         waits before it answers each message
 *      "down": false}        every connection is turned away with 421
 */
import { z } from "zod";
import { createMailFake, PortTaken } from "./server";

const port = z.coerce.number().int().min(1).max(65_535);
const environment = z
  .object({
    SMTP_PORT: port.default(3004),
    MAIL_PORT: port.default(3003),
    HOST: z.string().default("127.0.0.1"),
    DATA_DIR: z.string().default(".data"),
  })
  .safeParse(
    // A variable that is set to nothing counts as not set.
    Object.fromEntries(Object.entries(process.env).filter(([, value]) => value !== "")),
  );

function refuse(reason: string): never {
  console.error(`mail-fake: ${reason}`);
  process.exit(1);
}

if (process.env.NUMBERLEAF_MODE === "production") refuse("refuses to run in production mode");
if (!environment.success) {
  refuse(environment.error.issues.map((issue) => `${issue.path.join(".")} ${issue.message}`).join("; "));
}
const { SMTP_PORT: smtpPort, MAIL_PORT: mailPort, HOST: host, DATA_DIR: dataDir } = environment.data;
const fake = createMailFake({ smtpPort, mailPort, host, dataDir });

let stopping = false;
function stop(): void {
  if (stopping) return;
  stopping = true;
  // Whatever still hangs after this has had its time; what was acknowledged is on the disk.
  setTimeout(() => process.exit(0), 1500).unref();
  fake.close().then(() => process.exit(0));
}
process.on("SIGTERM", stop);
process.on("SIGINT", stop);

try {
  const { url } = await fake.listen();
  console.log(`mail-fake: listening on ${url}, taking mail on port ${smtpPort}`);
} catch (error) {
  if (error instanceof PortTaken) refuse(error.message);
  throw error;
}
