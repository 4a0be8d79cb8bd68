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
import { chooseMailTexts, type MailLanguage } from "~/platform/mail/languages";
import { formatMailDay, formatMailInstant, toOneLine } from "~/platform/mail/mail-values";
import { noticeTexts } from "./notice-texts";

/**
 * All that the mail of a notice may know. There is no athlete, no injury and no free text here on purpose:
 * what the template never receives it cannot leak.
 */
export type NoticeEmailProps = {
  language: MailLanguage;
  organisation: string;
  urgent: boolean;
  /** The organisation's calendar date that the news is of, as `2026-10-06`. */
  day: string;
  /** Whom to call: a person of the organisation, and the number. */
  contact: { name: string; phone: string };
  /** The guardian's own link to this notice. */
  linkUrl: string;
  linkExpiresAt: Date;
  /** The organisation's time zone, in which the end of the link is told. */
  timeZone: string;
  /** Where this guardian stops such mails. */
  stopUrl: string;
};

/** Composes the mail that tells one guardian of one notice; throws when a link, number or date is unfit. */
export async function composeNotice(props: NoticeEmailProps) {
  const { language, locale, texts } = chooseMailTexts(noticeTexts, props.language);
  const organisation = toOneLine(props.organisation);
  const tone = props.urgent ? texts.urgent : texts.ordinary;
  const news = texts.news(organisation, formatMailDay(props.day, locale));
  const until = formatMailInstant(props.linkExpiresAt, props.timeZone, locale);
  const call = (
    <>
      <EmailText>{texts.callWhom(toOneLine(props.contact.name))}</EmailText>
      <EmailPhone phone={props.contact.phone} />
    </>
  );

  return renderMail(
    tone.subject(organisation),
    <EmailLayout
      language={language}
      preview={tone.preview}
      sender={organisation}
      heading={tone.heading}
      smallPrint={
        <>
          <EmailSmallPrint>{texts.notFromUs}</EmailSmallPrint>
          <EmailSmallPrint>{texts.notForYou}</EmailSmallPrint>
          <EmailSmallPrint>{texts.stop}</EmailSmallPrint>
          <EmailSmallLink href={props.stopUrl}>{texts.stopLink}</EmailSmallLink>
        </>
      }
    >
      {props.urgent ? (
        <EmailCallout serious>
          <EmailText>
            <strong>{texts.urgent.lead}</strong>
          </EmailText>
          {call}
          <EmailText>{texts.urgent.answerPhone}</EmailText>
        </EmailCallout>
      ) : null}
      <EmailText>{news}</EmailText>
      {props.urgent ? null : <EmailText>{texts.ordinary.notUrgent}</EmailText>}
      <EmailText>{texts.privacy}</EmailText>
      <EmailButton href={props.linkUrl}>{texts.openPage}</EmailButton>
      <EmailText>{texts.aboutLink}</EmailText>
      <EmailText>{texts.linkEnds(until)}</EmailText>
      {props.urgent ? null : (
        <EmailCallout serious={false}>
          <EmailText>{texts.ordinary.mayCall}</EmailText>
          {call}
        </EmailCallout>
      )}
    </EmailLayout>,
  );
}
