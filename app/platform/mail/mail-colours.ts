/**
 * The theme of the pages as sRGB hex, since mail programs know neither custom properties nor OKLCH.
 * Every pair of text and ground that the layout uses is at 4.5:1 or more, which a test computes.
 */
export const mailColours = {
  light: {
    page: "#f8f6f1",
    paper: "#fdfcf9",
    text: "#162232",
    soft: "#525c69",
    line: "#d0cec4",
    primary: "#005767",
    onPrimary: "#fdfcf9",
    serious: "#8a1842",
  },
  dark: {
    page: "#0b1420",
    paper: "#182230",
    text: "#f0eee7",
    soft: "#b0b8c3",
    line: "#3f4955",
    primary: "#71cfd9",
    onPrimary: "#0b1420",
    serious: "#fa969f",
  },
  /** The head of a mail is the same by day and by night: the mark is sand on ink. */
  head: { ground: "#162232", text: "#f8f6f1", mark: "#f2b872" },
} as const;
