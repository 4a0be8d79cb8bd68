import {
  EmailButton,
  EmailCallout,
  EmailLayout,
  EmailPhone,
  EmailSmallLink,
  EmailSmallPrint,
  EmailText,
  renderMail,
} from "~/platform/mail/email-layout";
import { chooseMailTexts } from "~/platform/mail/languages";
import { formatMailInstant, toOneLine } from "~/platform/mail/mail-values";
import type { NoticeEmailProps } from "./notice-email";
import { noticeTexts } from "./notice-texts";

/** The same as a notice knows, less what a second mail need not repeat. */
export type FreshLinkEmailProps = Omit<NoticeEmailProps, "urgent" | "day">;

/** Composes the mail that brings a guardian, who asked for it, a new link to the same notice. */
export async function composeFreshLink(props: FreshLinkEmailProps) {
  const { language, locale, texts } = chooseMailTexts(noticeTexts, props.language);
  const organisation = toOneLine(props.organisation);
  const until = formatMailInstant(props.linkExpiresAt, props.timeZone, locale);

  return renderMail(
    texts.freshLink.subject(organisation),
    <EmailLayout
      language={language}
      preview={texts.freshLink.preview}
      sender={organisation}
      heading={texts.freshLink.heading}
      smallPrint={
        <>
          <EmailSmallPrint>{texts.freshLink.notAsked}</EmailSmallPrint>
          <EmailSmallPrint>{texts.notFromUs}</EmailSmallPrint>
          <EmailSmallPrint>{texts.stop}</EmailSmallPrint>
          <EmailSmallLink href={props.stopUrl}>{texts.stopLink}</EmailSmallLink>
        </>
      }
    >
      <EmailText>{texts.freshLink.lead(organisation)}</EmailText>
      <EmailText>{texts.freshLink.oldLink}</EmailText>
      <EmailButton href={props.linkUrl}>{texts.openPage}</EmailButton>
      <EmailText>{texts.aboutLink}</EmailText>
      <EmailText>{texts.linkEnds(until)}</EmailText>
      <EmailCallout serious={false}>
        <EmailText>{texts.ordinary.mayCall}</EmailText>
        <EmailText>{texts.callWhom(toOneLine(props.contact.name))}</EmailText>
        <EmailPhone phone={props.contact.phone} />
      </EmailCallout>
    </EmailLayout>,
  );
}
