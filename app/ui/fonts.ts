import rubikLatin from "@fontsource-variable/rubik/files/rubik-latin-wght-normal.woff2?url";

/** Address of the font file that every page needs, for `<link rel="preload" as="font" crossOrigin="anonymous">`. */
export const rubikLatinUrl = rubikLatin;

/** Ready for a route module's `links`. The latin-ext subset is left to the browser: few pages need it. */
export const fontPreloads = [
  { rel: "preload", as: "font", type: "font/woff2", href: rubikLatin, crossOrigin: "anonymous" },
] as const;
