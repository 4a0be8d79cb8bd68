import type { MailTexts } from "~/platform/mail/languages";

/**
 * Words of the mails to guardians. They may say that there is news about health, and nothing else about it:
 * no name of an athlete, no body part, nothing clinical, in any language. Reading age 11 or below.
 */
export type NoticeTexts = {
  /** True once a fluent reader outside the project has agreed to these words. */
  reviewed: boolean;
  urgent: {
    subject: (organisation: string) => string;
    preview: string;
    heading: string;
    lead: string;
    answerPhone: string;
  };
  ordinary: {
    subject: (organisation: string) => string;
    preview: string;
    heading: string;
    notUrgent: string;
    mayCall: string;
  };
  /** `day` is written out, since a mail may be read later than it was sent. */
  news: (organisation: string, day: string) => string;
  callWhom: (name: string) => string;
  privacy: string;
  openPage: string;
  aboutLink: string;
  linkEnds: (until: string) => string;
  notFromUs: string;
  notForYou: string;
  stop: string;
  stopLink: string;
  freshLink: {
    subject: (organisation: string) => string;
    preview: string;
    heading: string;
    lead: (organisation: string) => string;
    oldLink: string;
    notAsked: string;
  };
};

export const noticeTexts: MailTexts<NoticeTexts> = {
  en: {
    reviewed: false,
    urgent: {
      subject: (organisation) => `Urgent: please call ${organisation} now`,
      preview: "We need to speak with you now. Please call us.",
      heading: "Please call us now",
      lead: "This is urgent. Please call us as soon as you see this.",
      answerPhone: "We may be trying to call you. If your phone rings, please answer it.",
    },
    ordinary: {
      subject: (organisation) => `News for you from ${organisation}`,
      preview: "This is not urgent. Please read it today.",
      heading: "We have news for you",
      notUrgent: "This is not urgent. Please read our news today.",
      mayCall: "You can also call us and ask.",
    },
    news: (organisation, day) =>
      `We have news from ${organisation}. It is about the health of an athlete in your care. It is from ${day}.`,
    callWhom: (name) => `Ask for ${name}:`,
    privacy: "We keep health news out of e-mail. You can read it on a safe page.",
    openPage: "Read the news",
    aboutLink: "The page will ask you one thing that you know. This is so that no one else can read it.",
    linkEnds: (until) =>
      `The link works until ${until}. After that, you can ask for a new one on the same page.`,
    notFromUs: "Not sure that this came from us? Do not open the link. Call us on a number that you know.",
    notForYou: "Not meant for you? Please call us, so that we can put it right. Then delete this e-mail.",
    stop: "Do you want no more e-mails like this? Then we can only reach you by phone.",
    stopLink: "Stop these e-mails",
    freshLink: {
      subject: (organisation) => `Your new link from ${organisation}`,
      preview: "Here is the new link that you asked for.",
      heading: "Here is your new link",
      lead: (organisation) => `You asked for a new link to read the news from ${organisation}.`,
      oldLink: "The old link no longer works.",
      notAsked:
        "Did you not ask for it? Then you can ignore this e-mail. No one can read the news with it alone.",
    },
  },
};
