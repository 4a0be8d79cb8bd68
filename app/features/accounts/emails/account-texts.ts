import type { MailTexts } from "~/platform/mail/languages";

/** Roles as `trust.md` names them in code; the words are those a person reads. */
export type InvitedRole = "admin" | "lead" | "trainer" | "coach";

/** Words of the mails about accounts. Reading age 11 or below. */
export type AccountTexts = {
  /** True once a fluent reader outside the project has agreed to these words. */
  reviewed: boolean;
  roles: Record<InvitedRole, string>;
  /** How long a link works, in words: "30 minutes", "1 hour", "2 days". */
  duration: (minutes: number) => string;
  invitation: {
    subject: (organisation: string) => string;
    preview: (inviter: string) => string;
    heading: (organisation: string) => string;
    lead: (inviter: string, organisation: string) => string;
    role: (roles: string) => string;
    allTeams: string;
    listedTeams: (teams: string) => string;
    accept: string;
    ends: (until: string) => string;
    sameAddress: (email: string) => string;
    notExpected: string;
  };
  verification: {
    subject: string;
    preview: string;
    heading: string;
    lead: (email: string) => string;
    confirm: string;
    ends: (duration: string) => string;
    notYou: string;
  };
  passwordReset: {
    subject: string;
    preview: string;
    heading: string;
    lead: (email: string) => string;
    choose: string;
    ends: (duration: string) => string;
    signedOut: string;
    notYou: string;
  };
};

export const accountTexts: MailTexts<AccountTexts> = {
  en: {
    reviewed: false,
    roles: {
      admin: "club administrator",
      lead: "medical lead",
      trainer: "athletic trainer",
      coach: "coach",
    },
    duration: (minutes) => {
      if (minutes % 1440 === 0) return count(minutes / 1440, "day");
      if (minutes % 60 === 0) return count(minutes / 60, "hour");
      return count(minutes, "minute");
    },
    invitation: {
      subject: (organisation) => `Join ${organisation} on Haleside`,
      preview: (inviter) => `${inviter} asks you to join.`,
      heading: (organisation) => `Join ${organisation}`,
      lead: (inviter, organisation) =>
        `${inviter} asks you to join ${organisation} on Haleside. It is how we look after the health of our athletes.`,
      role: (roles) => `Your role will be: ${roles}.`,
      allTeams: "You will work with all teams.",
      listedTeams: (teams) => `Your teams: ${teams}.`,
      accept: "See the invitation",
      ends: (until) => `The link works until ${until}. After that, ask us to send it again.`,
      sameAddress: (email) => `Please join with this e-mail address: ${email}.`,
      notExpected: "Do you not know us? Then you can ignore this e-mail. Nothing happens until you say yes.",
    },
    verification: {
      subject: "Confirm your e-mail address for Haleside",
      preview: "One press and you are done.",
      heading: "Is this your e-mail address?",
      lead: (email) => `Someone used ${email} to join Haleside. If it was you, please confirm it.`,
      confirm: "Confirm my address",
      ends: (duration) => `The link works for ${duration}.`,
      notYou: "Was it not you? Then do not press the button. You can ignore this e-mail.",
    },
    passwordReset: {
      subject: "Choose a new password for Haleside",
      preview: "You asked for a new password.",
      heading: "Choose a new password",
      lead: (email) => `Someone asked for a new password for ${email}. If it was you, press the button.`,
      choose: "Choose a new password",
      ends: (duration) => `The link works once, and for ${duration}.`,
      signedOut: "You will then have to sign in again on all your devices.",
      notYou: "Was it not you? Then do not press the button. Your old password still works.",
    },
  },
};

function count(value: number, unit: string) {
  return `${value} ${unit}${value === 1 ? "" : "s"}`;
}
