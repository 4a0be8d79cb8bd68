import {
  EmailButton,
  EmailLayout,
  EmailSmallPrint,
  EmailText,
  renderMail,
} from "~/platform/mail/email-layout";
import { chooseMailTexts, type MailLanguage } from "~/platform/mail/languages";
import { formatMailInstant, toOneLine } from "~/platform/mail/mail-values";
import { accountTexts, type InvitedRole } from "./account-texts";

export type InvitationEmailProps = {
  language: MailLanguage;
  /** Name of who invites. */
  inviter: string;
  organisation: string;
  /** The address that was invited, and that alone can accept. */
  email: string;
  roles: readonly InvitedRole[];
  /** Names of the listed teams, or `all`. */
  teams: "all" | readonly string[];
  linkUrl: string;
  expiresAt: Date;
  timeZone: string;
};

/** Composes the invitation of one person into one organisation. */
export async function composeInvitation(props: InvitationEmailProps) {
  const { language, locale, texts } = chooseMailTexts(accountTexts, props.language);
  const words = texts.invitation;
  const organisation = toOneLine(props.organisation);
  const inviter = toOneLine(props.inviter);
  const inWords = new Intl.ListFormat(locale, { type: "conjunction" });
  const roles = inWords.format(props.roles.map((role) => texts.roles[role]));
  const teams =
    props.teams === "all" ? words.allTeams : words.listedTeams(inWords.format(props.teams.map(toOneLine)));

  return renderMail(
    words.subject(organisation),
    <EmailLayout
      language={language}
      preview={words.preview(inviter)}
      sender={organisation}
      heading={words.heading(organisation)}
      smallPrint={<EmailSmallPrint>{words.notExpected}</EmailSmallPrint>}
    >
      <EmailText>{words.lead(inviter, organisation)}</EmailText>
      <EmailText>{words.role(roles)}</EmailText>
      {props.teams.length > 0 ? <EmailText>{teams}</EmailText> : null}
      <EmailButton href={props.linkUrl}>{words.accept}</EmailButton>
      <EmailText>{words.sameAddress(toOneLine(props.email))}</EmailText>
      <EmailText>{words.ends(formatMailInstant(props.expiresAt, props.timeZone, locale))}</EmailText>
    </EmailLayout>,
  );
}
