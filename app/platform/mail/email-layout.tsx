import {
  Body,
  Button,
  Container,
  Head,
  Heading,
  Html,
  Link,
  Preview,
  Section,
  Text,
} from "@react-email/components";
import { render, toPlainText } from "@react-email/render";
import type { ReactElement, ReactNode } from "react";
import type { MailLanguage } from "./languages";
import { mailColours } from "./mail-colours";
import { requireWebLink, toOneLine, toPhoneLink } from "./mail-values";

/** A mail ready for the transport. */
export type ComposedMail = { subject: string; html: string; text: string };

const { light, dark, head } = mailColours;
const fontFamily = 'Rubik, "Segoe UI", Roboto, Helvetica, Arial, sans-serif';

// Mail programs keep inline styles and often drop everything else: light is inline, dark overrides by class.
const darkStyles = `
:root { color-scheme: light dark; supported-color-schemes: light dark; }
@media (prefers-color-scheme: dark) {
  .page, .page > table > tbody > tr > td { background-color: ${dark.page} !important; }
  .paper { background-color: ${dark.paper} !important; }
  .text { color: ${dark.text} !important; }
  .soft { color: ${dark.soft} !important; }
  .link { color: ${dark.primary} !important; }
  .serious { color: ${dark.serious} !important; }
  .head { border-color: ${dark.line} !important; }
  .line { border-color: ${dark.line} !important; }
  .serious-line { border-color: ${dark.serious} !important; }
  .button { background-color: ${dark.primary} !important; color: ${dark.onPrimary} !important; }
}`;

/** The frame of every mail: who sends it in the head, one column of large type, the small print at the end. */
export function EmailLayout(props: {
  language: MailLanguage;
  /** Shown by mail programs beside the subject. */
  preview: string;
  sender: string;
  heading: string;
  children: ReactNode;
  smallPrint: ReactNode;
}) {
  const sender = toOneLine(props.sender);
  return (
    <Html lang={props.language}>
      <Head>
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content="light dark" />
        <meta name="supported-color-schemes" content="light dark" />
        {/* Phone numbers are linked by us; a program must not turn dates and tokens into more of them. */}
        <meta name="format-detection" content="telephone=no, date=no, address=no, email=no" />
        <title>{props.heading}</title>
        <style>{darkStyles}</style>
      </Head>
      <Body
        className="page"
        style={{ backgroundColor: light.page, margin: 0, padding: "16px 8px", fontFamily }}
      >
        <Preview>{props.preview}</Preview>
        <Container style={{ maxWidth: "560px", margin: "0 auto" }}>
          <Section
            className="head"
            style={{
              backgroundColor: head.ground,
              borderBottom: `1.5px solid ${head.ground}`,
              borderRadius: "6px 6px 0 0",
              padding: "16px 24px",
            }}
          >
            <Mark />
            <Text style={{ color: head.text, fontSize: "17px", lineHeight: 1.3, fontWeight: 600, margin: 0 }}>
              {sender}
            </Text>
          </Section>
          <Section
            className="paper"
            style={{ backgroundColor: light.paper, borderRadius: "0 0 6px 6px", padding: "24px 24px 20px" }}
          >
            <Heading
              as="h1"
              className="text"
              style={{
                color: light.text,
                fontSize: "25px",
                lineHeight: 1.25,
                fontWeight: 600,
                margin: "0 0 16px",
              }}
            >
              {props.heading}
            </Heading>
            {props.children}
            <Section
              className="line"
              style={{ borderTop: `1.5px solid ${light.line}`, marginTop: "24px", paddingTop: "16px" }}
            >
              {props.smallPrint}
            </Section>
          </Section>
        </Container>
      </Body>
    </Html>
  );
}

/** The mark, a shallow arc over a spot, drawn with borders: a picture would have to be fetched. */
function Mark() {
  const shape = { fontSize: 0, lineHeight: 0 } as const;
  return (
    <div aria-hidden="true" style={{ float: "right", width: "34px", padding: "3px 0 0" }}>
      <div
        style={{
          ...shape,
          height: "9px",
          borderTop: `3px solid ${head.mark}`,
          borderRadius: "50% / 100% 100% 0 0",
        }}
      />
      <div
        style={{
          ...shape,
          width: "7px",
          height: "7px",
          margin: "-3px auto 0",
          borderRadius: "50%",
          backgroundColor: head.mark,
        }}
      />
    </div>
  );
}

/** A paragraph of the message. */
export function EmailText(props: { children: ReactNode }) {
  return (
    <Text
      className="text"
      style={{ color: light.text, fontSize: "18px", lineHeight: 1.5, margin: "0 0 14px" }}
    >
      {props.children}
    </Text>
  );
}

/** A paragraph that is marked off by a line, for what must not be missed. */
export function EmailCallout(props: { serious: boolean; children: ReactNode }) {
  const colour = props.serious ? light.serious : light.line;
  return (
    <Section
      className={props.serious ? "serious-line" : "line"}
      style={{ borderLeft: `4px solid ${colour}`, paddingLeft: "14px", margin: "0 0 18px" }}
    >
      {props.children}
    </Section>
  );
}

/** A phone number to press, large enough for a thumb. */
export function EmailPhone(props: { phone: string }) {
  return (
    <Text style={{ fontSize: "25px", lineHeight: "44px", fontWeight: 600, margin: "-8px 0 10px" }}>
      <Link
        className="link"
        href={toPhoneLink(props.phone)}
        style={{ color: light.primary, textDecoration: "underline" }}
        data-phone=""
      >
        {toOneLine(props.phone)}
      </Link>
    </Text>
  );
}

/** The one thing to press. */
export function EmailButton(props: { href: string; children: string }) {
  return (
    <Section style={{ margin: "20px 0 16px" }}>
      <Button
        className="button"
        href={requireWebLink(props.href)}
        style={{
          backgroundColor: light.primary,
          color: light.onPrimary,
          fontSize: "18px",
          fontWeight: 600,
          borderRadius: "6px",
          padding: "17px 24px",
        }}
      >
        {props.children}
      </Button>
    </Section>
  );
}

/** A paragraph of the small print. */
export function EmailSmallPrint(props: { children: ReactNode }) {
  return (
    <Text
      className="soft"
      style={{ color: light.soft, fontSize: "15px", lineHeight: 1.5, margin: "0 0 10px" }}
    >
      {props.children}
    </Text>
  );
}

/** A link of the small print, on a line of its own so that a thumb finds it. */
export function EmailSmallLink(props: { href: string; children: string }) {
  return (
    <Text style={{ fontSize: "15px", lineHeight: "44px", margin: 0 }}>
      <Link
        className="link"
        href={requireWebLink(props.href)}
        style={{ color: light.primary, textDecoration: "underline", display: "inline-block" }}
      >
        {props.children}
      </Link>
    </Text>
  );
}

// What we use of html-to-text, whose package brings no types.
type LinkNode = { children: unknown; attribs: { href: string } };
type TextBuilder = {
  addInline(text: string, options?: { noWordTransform: boolean }): void;
  addLineBreak(): void;
};

/**
 * Renders a template to both parts. The text part is derived from the HTML part, so the two never say
 * different things; its links stand whole on their own.
 */
export async function renderMail(subject: string, element: ReactElement): Promise<ComposedMail> {
  const html = await render(element);
  const text = toPlainText(html, {
    formatters: {
      // An address alone on its line is pressed, copied and read aloud more easily.
      linkBelowWords: (
        element: LinkNode,
        walk: (nodes: unknown, builder: TextBuilder) => void,
        builder: TextBuilder,
      ) => {
        walk(element.children, builder);
        builder.addInline(":");
        builder.addLineBreak();
        builder.addInline(element.attribs.href, { noWordTransform: true });
      },
    },
    selectors: [
      { selector: "h1", options: { uppercase: false } },
      { selector: "a", format: "linkBelowWords" },
      { selector: "a[data-phone]", format: "anchor", options: { ignoreHref: true } },
    ],
  });
  return { subject: toOneLine(subject), html, text: `${text.trim()}\n` };
}
