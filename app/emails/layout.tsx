import {
  Body,
  Button,
  Column,
  Container,
  Head,
  Heading,
  Hr,
  Html,
  Link,
  Preview,
  Row,
  Section,
  Text,
} from "@react-email/components";
import type { ReactNode } from "react";
import { LANGUAGE_TAG, type Language } from "~/languages/language";

/*
 * The look of e-mails: a sheet of paper on the mount, one column, one press at most. Mail programs know no
 * custom properties and few no style sheets, so the values of the tokens stand here, and styles are inline.
 */
const PAPER = "#fcfbf8";
const MOUNT = "#e3e1db";
const INK = "#1c1b19";
const GRAPHITE = "#53524e";
const RULE = "#c6c3ba";
const SAFELIGHT = "#9c310b";
const ON_SAFELIGHT = "#fffaf5";
const TITLE = '"Cormorant Garamond", "Iowan Old Style", Palatino, Georgia, serif';
const WORK = '"Source Sans 3", "Segoe UI", "Helvetica Neue", Arial, sans-serif';

export type EmailStudio = { name: string; email: string; address: readonly string[] };

export type EmailLayoutProps = {
  language: Language;
  /** Shown by mail programs beside the subject. */
  preview: string;
  title: string;
  studio: EmailStudio;
  /** Why the reader gets this, above the studio's address. */
  reason: string;
  children: ReactNode;
};

/** The sheet every e-mail is written on. Body from `EmailText`, `EmailPress`, `EmailMarginLine`, `EmailFacts`. */
export function EmailLayout({ language, preview, title, studio, reason, children }: EmailLayoutProps) {
  return (
    <Html lang={LANGUAGE_TAG[language]} dir="ltr">
      <Head>
        <title>{title}</title>
      </Head>
      <Body style={{ margin: 0, padding: "24px 8px", backgroundColor: MOUNT, color: INK, fontFamily: WORK }}>
        <Preview>{preview}</Preview>
        <Container style={{ maxWidth: "560px", backgroundColor: PAPER, padding: "32px 28px 24px" }}>
          <Text style={{ margin: "0 0 20px", fontFamily: TITLE, fontSize: "19px", lineHeight: "24px" }}>
            {studio.name}
          </Text>
          <Heading
            as="h1"
            style={{
              margin: "0 0 16px",
              fontFamily: TITLE,
              fontSize: "32px",
              lineHeight: "36px",
              fontWeight: 500,
            }}
          >
            {title}
          </Heading>
          {children}
          <Hr style={{ margin: "28px 0 14px", border: "0", borderTop: `1px solid ${RULE}` }} />
          <Text style={{ margin: "0 0 8px", fontSize: "13px", lineHeight: "18px", color: GRAPHITE }}>
            {reason}
          </Text>
          <Text style={{ margin: 0, fontSize: "13px", lineHeight: "18px", color: GRAPHITE }}>
            {[studio.name, ...studio.address].join(" · ")} ·{" "}
            <Link href={`mailto:${studio.email}`} style={{ color: GRAPHITE, textDecoration: "underline" }}>
              {studio.email}
            </Link>
          </Text>
        </Container>
      </Body>
    </Html>
  );
}

/** A paragraph. */
export function EmailText({ children, quiet = false }: { children: ReactNode; quiet?: boolean }) {
  return (
    <Text
      style={{
        margin: "0 0 14px",
        fontSize: quiet ? "14px" : "16px",
        lineHeight: quiet ? "20px" : "25px",
        color: quiet ? GRAPHITE : INK,
      }}
    >
      {children}
    </Text>
  );
}

/** The one thing to do, and its address in full for whoever would rather copy it. */
export function EmailPress({ to, children }: { to: string; children: ReactNode }) {
  return (
    <Section style={{ margin: "20px 0" }}>
      <Button
        href={to}
        style={{
          backgroundColor: SAFELIGHT,
          color: ON_SAFELIGHT,
          borderRadius: "2px",
          padding: "13px 22px",
          fontSize: "16px",
          fontWeight: 600,
          textDecoration: "none",
        }}
      >
        {children}
      </Button>
    </Section>
  );
}

/** The lower margin of a signed print: number left, title in the middle, signature and year right. */
export function EmailMarginLine({
  number,
  title,
  signature,
}: {
  number: string;
  title: string;
  signature: string;
}) {
  const cell = { fontFamily: TITLE, fontSize: "19px", lineHeight: "24px", color: GRAPHITE, padding: "8px 0" };
  return (
    <Section style={{ margin: "16px 0", borderTop: `1px solid ${RULE}`, borderBottom: `1px solid ${RULE}` }}>
      <Row className="row">
        <Column style={{ ...cell, width: "22%", color: INK }}>{number} </Column>
        <Column style={{ ...cell, textAlign: "center", fontStyle: "italic" }}>{title} </Column>
        <Column style={{ ...cell, width: "32%", textAlign: "right", fontStyle: "italic" }}>
          {signature}
        </Column>
      </Row>
    </Section>
  );
}

/** Terms and what holds for them: "Delivery" and a sum, "Sent with" and a carrier. */
export function EmailFacts({
  items,
}: {
  items: readonly { term: string; detail: ReactNode; total?: boolean }[];
}) {
  return (
    <Section style={{ margin: "8px 0 16px" }}>
      {items.map(({ term, detail, total }) => (
        <Row key={term} className="row">
          <Column
            style={{
              padding: "6px 12px 6px 0",
              fontSize: "15px",
              lineHeight: "21px",
              color: total ? INK : GRAPHITE,
              fontWeight: total ? 600 : 400,
              borderTop: `1px solid ${total ? INK : RULE}`,
              verticalAlign: "top",
            }}
          >
            {term}:{" "}
          </Column>
          <Column
            align="right"
            style={{
              padding: "6px 0",
              fontSize: "15px",
              lineHeight: "21px",
              fontWeight: total ? 600 : 400,
              borderTop: `1px solid ${total ? INK : RULE}`,
              verticalAlign: "top",
            }}
          >
            {detail}
          </Column>
        </Row>
      ))}
    </Section>
  );
}
