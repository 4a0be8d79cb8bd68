/** Languages that mail can be written in, by BCP 47 tag: English, Spanish, Polish, Welsh. */
export const mailLanguages = ["en", "es", "pl", "cy"] as const;

export type MailLanguage = (typeof mailLanguages)[number];

/** Texts of one template: English always exists, the others as they are translated. */
export type MailTexts<T> = { en: T } & Partial<Record<MailLanguage, T>>;

/** Formats of dates and numbers that go with each language. */
export const mailLocales: Record<MailLanguage, string> = { en: "en-GB", es: "es", pl: "pl", cy: "cy" };

/**
 * The texts for a reader's language, English where there are none yet. The returned language is the one the
 * texts are really in: it goes into the mail's `lang`, so that a screen reader speaks it rightly.
 */
export function chooseMailTexts<T>(all: MailTexts<T>, wanted: MailLanguage) {
  const texts = all[wanted];
  if (texts !== undefined) return { language: wanted, locale: mailLocales[wanted], texts };
  return { language: "en" as const, locale: mailLocales.en, texts: all.en };
}
