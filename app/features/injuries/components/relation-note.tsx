import { subsequenceWords } from "~/features/vocabulary";
import { Note, TextLink } from "~/ui";
import type { SubsequenceSuggestion } from "../subsequence";
import { timingWords } from "../subsequence";

type Props = {
  relation: SubsequenceSuggestion;
  confirmed: string | null;
  /** Path of the list of injuries, for the link to the earlier one. */
  base: string;
};

/** What the injury seems to be to earlier ones, for a clinical role to confirm; the other knee after an ACL injury. */
export function RelationNote({ relation, confirmed, base }: Props) {
  const { subsequence, timing, to, waitsFor, contralateralAcl } = relation;
  const waits =
    waitsFor === "pathology"
      ? "There was an earlier injury of the same area and side. Enter tissue and pathology to tell whether this is the same."
      : waitsFor === "side"
        ? "There was an earlier injury of the same area. Enter the side to tell whether this is the same place."
        : null;
  const suggested =
    subsequence && subsequence !== "index" && !confirmed
      ? `This looks like: ${subsequenceWords[subsequence]}${timing ? ` (${timingWords[timing]})` : ""}. Confirm it in the record.`
      : null;
  return (
    <>
      {contralateralAcl ? (
        <Note kind="attention" title="The opposite knee had an anterior cruciate ligament injury">
          <p>
            This is the contralateral knee of an athlete with an earlier ACL injury. Consider this in what
            follows.
          </p>
        </Note>
      ) : null}
      {waits || suggested ? (
        <Note>
          <p>
            {waits ?? suggested}{" "}
            {to ? <TextLink to={`${base}/${to}`}>Open the earlier injury</TextLink> : null}
          </p>
        </Note>
      ) : null}
    </>
  );
}
