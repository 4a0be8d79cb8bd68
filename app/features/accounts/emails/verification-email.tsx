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

export type VerificationEmailProps = {
  language: MailLanguage;
  email: string;
  linkUrl: string;
  /** Minutes for which the link works. */
  validMinutes: number;
};

/** Composes the mail by which a person shows that an e-mail address is theirs. */
export async function composeVerification(props: VerificationEmailProps) {
  const { language, texts } = chooseMailTexts(accountTexts, props.language);
  const words = texts.verification;
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
      <EmailButton href={props.linkUrl}>{words.confirm}</EmailButton>
      <EmailText>{words.ends(texts.duration(props.validMinutes))}</EmailText>
    </EmailLayout>,
  );
}
