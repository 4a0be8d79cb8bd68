import {
  EmailButton,
  EmailLayout,
  EmailSmallPrint,
  EmailText,
  renderMail,
} from "~/platform/mail/email-layout";
import { chooseMailTexts, type MailLanguage } from "~/platform/mail/languages";
import { toOneLine } from "~/platform/mail/mail-values";
import { accountTexts } from "./account-texts";

export type PasswordResetEmailProps = {
  language: MailLanguage;
  email: string;
  linkUrl: string;
  /** Minutes for which the link works. */
  validMinutes: number;
};

/** Composes the mail that lets a person choose a new password. */
export async function composePasswordReset(props: PasswordResetEmailProps) {
  const { language, texts } = chooseMailTexts(accountTexts, props.language);
  const words = texts.passwordReset;
  return renderMail(
    words.subject,
    <EmailLayout
      language={language}
      preview={words.preview}
      sender="Haleside"
      heading={words.heading}
      smallPrint={<EmailSmallPrint>{words.notYou}</EmailSmallPrint>}
    >
      <EmailText>{words.lead(toOneLine(props.email))}</EmailText>
      <EmailButton href={props.linkUrl}>{words.choose}</EmailButton>
      <EmailText>{words.ends(texts.duration(props.validMinutes))}</EmailText>
      <EmailText>{words.signedOut}</EmailText>
    </EmailLayout>,
  );
}
