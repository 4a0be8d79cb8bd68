import { blockWords, sentenceCase, skipReasonWords } from "~/features/vocabulary";
import type { FieldConflict, FieldValue } from "~/platform/merge-fields";
import { Button, ChalkStatus, Note } from "~/ui";
import { type SkipReason, type WarmUpBlock, warmUpBlocks } from "~db/schema/codes";
import type { WarmUpPage } from "../warm-up-page.server";

type StatusProps = {
  waiting: number;
  trouble: "none" | "no-signal" | "signed-out";
  lastSaved: string | null;
};

/** The chalk line: broken while something waits, solid when all is saved. */
export function RecordStatus({ waiting, trouble, lastSaved }: StatusProps) {
  const entries = `${waiting} ${waiting === 1 ? "entry waits" : "entries wait"} on this phone; nothing is lost.`;
  if (waiting > 0 && trouble === "no-signal")
    return <ChalkStatus line="broken">No signal. {entries}</ChalkStatus>;
  if (waiting > 0 && trouble === "signed-out")
    return (
      <ChalkStatus line="broken">You are signed out. Sign in again in another tab. {entries}</ChalkStatus>
    );
  if (waiting > 0) return <ChalkStatus line="broken">Saving.</ChalkStatus>;
  return <ChalkStatus line="solid">{lastSaved ?? "Nothing recorded yet."}</ChalkStatus>;
}

const wordsOfField: Record<string, string> = {
  skipReason: "Why it was not done",
  skipNote: "In words",
  minutes: "Minutes",
  ledBy: "Led by",
};

function nameOf(field: string, athletes: WarmUpPage["athletes"]) {
  const [kind, key] = field.split(":");
  if (kind === "block" && warmUpBlocks.includes(key as WarmUpBlock))
    return sentenceCase(blockWords[key as WarmUpBlock]);
  const athlete = kind === "athlete" ? athletes.find(({ id }) => id === key) : undefined;
  if (athlete) return `${athlete.givenName} ${athlete.familyName}`;
  return wordsOfField[field] ?? "Entry";
}

function valueWords(field: string, value: FieldValue) {
  if (typeof value === "boolean") return value ? "ticked" : "not ticked";
  if (value === null) return "nothing";
  if (field === "skipReason") return skipReasonWords[value as SkipReason] ?? String(value);
  return String(value);
}

type ConflictProps = {
  conflicts: readonly FieldConflict[];
  athletes: WarmUpPage["athletes"];
  /** Without script the form itself is the choice: saving again keeps this person's. */
  onDecide?: (mine: boolean) => void;
};

/** Both values of what two people entered differently; a person decides. */
export function RecordConflict({ conflicts, athletes, onDecide }: ConflictProps) {
  if (conflicts.length === 0) return null;
  return (
    <Note kind="attention" role="alert" title="Somebody else entered something different meanwhile">
      <ul>
        {conflicts.map(({ field, stored, value }) => (
          <li key={field}>
            <strong className="font-medium">{nameOf(field, athletes)}</strong>: stored now{" "}
            {valueWords(field, stored)}; yours {valueWords(field, value)}
          </li>
        ))}
      </ul>
      {onDecide ? (
        <div className="flex flex-wrap gap-3">
          <Button type="button" size="large" onClick={() => onDecide(true)}>
            Keep mine
          </Button>
          <Button type="button" size="large" onClick={() => onDecide(false)}>
            Leave what is stored
          </Button>
        </div>
      ) : (
        <p>Nothing was changed. Yours is still in the form: save again to replace theirs.</p>
      )}
    </Note>
  );
}
