import { Form, href, Link } from "react-router";
import { Field } from "~/components/form/field";
import { type FormState, formState } from "~/components/form/form-state";
import { Problems } from "~/components/form/problems";
import { useBusy } from "~/components/form/use-busy";
import { Notice } from "~/components/ui/notice";
import { Press } from "~/components/ui/press";
import { Table } from "~/components/ui/table";
import { Window } from "~/components/ui/window";
import { segmentOf } from "~/languages/language";
import { fill, useLanguage, useMessages } from "~/languages/messages";
import type { FormProblem } from "~/platform/form-fields";

export type AccountView = {
  name: string;
  email: string;
  emailVerified: boolean;
  ownsOrders: boolean;
  /** What has just been done, from the address. */
  done: string | null;
  sessions: readonly { id: string; isThis: boolean; since: string; lastSeen: string }[];
};

/** Everything about one's own account: name, address, password, where one is signed in. */
export function AccountPage({ account, problem }: { account: AccountView; problem?: FormProblem }) {
  const words = useMessages().account;
  const lang = segmentOf(useLanguage());
  const intent = typeof problem?.answers.intent === "string" ? problem.answers.intent : undefined;
  /** The forms share field names, so a mistake belongs to the form it was made in. */
  const stateOf = (name: string, known: Record<string, string>) =>
    formState(intent === name ? problem : undefined, known, {
      email: `${name}-email`,
      password: `${name}-password`,
      form: `${name}-password`,
    });
  const name = stateOf("name", { name: account.name });
  const email = stateOf("email", { email: account.email });
  const password = stateOf("password", {});
  const failed = [name, email, password].find((state) => state.summary.length > 0);
  return (
    <>
      <title>{words.page.title}</title>
      <div className="flow">
        <h1>{words.page.title}</h1>
        {failed ? <Problems form={failed} /> : null}
        {intent === "send-again" ? <Problems form={formState(problem, {}, { form: "send-again" })} /> : null}
        <Done what={account.done} email={account.email} />
        {account.emailVerified ? null : <Unverified email={account.email} />}
        {account.ownsOrders ? (
          <p>
            <Link to={href("/:lang?/account/orders", { lang })}>{words.page.orders}</Link>
          </p>
        ) : null}
        <div className="sheets">
          <Details name={name} email={email} />
          <Password form={password} />
          <Sessions sessions={account.sessions} />
        </div>
      </div>
    </>
  );
}

function Done({ what, email }: { what: string | null; email: string }) {
  const { page } = useMessages().account;
  const sentence = {
    name: page.saved,
    email: page.emailChanged,
    password: page.passwordChanged,
    sent: fill(page.sent, { email }),
    ended: page.ended,
  }[what ?? ""];
  return sentence === undefined ? null : <Notice kind="done" title={sentence} role="status" />;
}

function Unverified({ email }: { email: string }) {
  const { page } = useMessages().account;
  const busy = useBusy("send-again");
  return (
    <Notice kind="attention" title={page.unverifiedTitle}>
      <p>{fill(page.unverifiedText, { email })}</p>
      <Form method="post">
        <Press id="send-again" name="intent" value="send-again" variant="outlined" small busy={busy}>
          {page.sendAgain}
        </Press>
      </Form>
    </Notice>
  );
}

function Details({ name, email }: { name: FormState; email: FormState }) {
  const words = useMessages().account;
  const busyName = useBusy("name");
  const busyEmail = useBusy("email");
  return (
    <Window labelledBy="details">
      <div className="form-parts">
        <h2 id="details">{words.page.details}</h2>
        <Form method="post">
          <input type="hidden" name="intent" value="name" />
          <div className="fields">
            <Field
              {...name.field("name")}
              label={words.name}
              hint={words.nameHint}
              autoComplete="name"
              required
            />
          </div>
          <p className="form-acts">
            <Press variant="outlined" busy={busyName}>
              {words.page.saveName}
            </Press>
          </p>
        </Form>
        <Form method="post">
          <input type="hidden" name="intent" value="email" />
          <div className="fields">
            <Field
              {...email.field("email")}
              id="email-email"
              label={words.email}
              hint={words.page.emailIntro}
              type="email"
              autoComplete="username"
              required
            />
            <Field
              {...email.field("password")}
              id="email-password"
              label={words.currentPassword}
              type="password"
              autoComplete="current-password"
              required
            />
          </div>
          <p className="form-acts">
            <Press variant="outlined" busy={busyEmail}>
              {words.page.saveEmail}
            </Press>
          </p>
        </Form>
      </div>
    </Window>
  );
}

function Password({ form }: { form: FormState }) {
  const words = useMessages().account;
  const busy = useBusy("password");
  return (
    <Window labelledBy="security">
      <div className="form-parts">
        <h2 id="security">{words.page.security}</h2>
        <Form method="post">
          <input type="hidden" name="intent" value="password" />
          <div className="fields">
            <Field
              {...form.field("password")}
              id="password-password"
              label={words.currentPassword}
              type="password"
              autoComplete="current-password"
              required
            />
            <Field
              {...form.field("newPassword")}
              label={words.newPassword}
              hint={words.newPasswordHint}
              type="password"
              autoComplete="new-password"
              required
            />
          </div>
          <p className="note">{words.page.passwordIntro}</p>
          <p className="form-acts">
            <Press variant="outlined" busy={busy}>
              {words.page.savePassword}
            </Press>
          </p>
        </Form>
        <div>
          <h3>{words.page.language}</h3>
          <p className="quiet">{words.page.languageText}</p>
        </div>
      </div>
    </Window>
  );
}

function Sessions({ sessions }: { sessions: AccountView["sessions"] }) {
  const words = useMessages().account;
  const lang = segmentOf(useLanguage());
  return (
    <div className="all">
      <Window labelledBy="sessions">
        <div className="form-parts">
          <h2 id="sessions">{words.page.sessions}</h2>
          <p>{words.page.sessionsText}</p>
          <Table
            caption={words.page.sessions}
            rows={sessions}
            rowKey={(session) => session.id}
            columns={[
              { key: "since", head: words.page.since, cell: (session) => session.since, names: true },
              { key: "seen", head: words.page.lastSeen, cell: (session) => session.lastSeen },
              {
                key: "end",
                head: words.page.end,
                headHidden: true,
                cell: (session) =>
                  session.isThis ? (
                    words.page.thisBrowser
                  ) : (
                    <Form method="post">
                      <input type="hidden" name="intent" value="end-session" />
                      <input type="hidden" name="sessionId" value={session.id} />
                      <Press
                        variant="word"
                        small
                        aria-label={fill(words.page.endLabel, { time: session.since })}
                      >
                        {words.page.end}
                      </Press>
                    </Form>
                  ),
              },
            ]}
          />
          <div className="acts">
            <Form method="post" action={href("/:lang?/sign-out", { lang })}>
              <Press variant="outlined">{words.signOut.press}</Press>
            </Form>
            <Form method="post">
              <input type="hidden" name="intent" value="everywhere" />
              <Press variant="outlined">{words.page.everywhere}</Press>
            </Form>
          </div>
        </div>
      </Window>
    </div>
  );
}
