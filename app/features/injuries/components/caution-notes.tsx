import { Note } from "~/ui";
import { type Caution, type SafeDefaultReason, safeDefaultWords } from "../cautions";

type Props = {
  cautions: readonly Caution[];
  /** Why the athlete becomes unavailable at once; empty when nothing is set. */
  reasons: readonly SafeDefaultReason[];
  /** Before saving ("will be") or after ("is"). */
  saved?: boolean;
};

const listed = new Intl.ListFormat("en-GB", { type: "conjunction" });

/** What to do now, where the decision is taken; and that the athlete is unavailable, with why. */
export function CautionNotes({ cautions, reasons, saved = false }: Props) {
  return (
    <>
      {cautions.map(({ kind, title, text }, index) => (
        <Note key={kind} kind="serious" title={title}>
          <p>
            {text}
            {!saved && index === cautions.length - 1 && reasons.length > 0 ? " Unavailable from now on." : ""}
          </p>
        </Note>
      ))}
      {reasons.length > 0 && (saved || cautions.length === 0) ? (
        <Note kind="attention" title={saved ? "Unavailable by the safe default" : "Unavailable from now on"}>
          <p>
            Because {listed.format(reasons.map((reason) => safeDefaultWords[reason]))}. Only a medical lead or
            an athletic trainer lifts this.
          </p>
        </Note>
      ) : null}
    </>
  );
}
