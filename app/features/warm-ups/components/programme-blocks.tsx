import { blockWords, sentenceCase } from "~/features/vocabulary";
import { Disclosure } from "~/ui";
import { type WarmUpBlock, warmUpBlocks } from "~db/schema/codes";

export type ProgrammeData = {
  name: string;
  version: number;
  exercises: readonly {
    position: number;
    block: WarmUpBlock;
    name: string;
    dose: string;
    cue: string;
    progressions: readonly string[];
  }[];
};

/** The programme's blocks, each with its exercises: dose, cue, and the progressions from the first to the hardest. */
export function ProgrammeBlocks({ programme }: { programme: ProgrammeData }) {
  return warmUpBlocks.map((block) => {
    const exercises = programme.exercises.filter((exercise) => exercise.block === block);
    if (exercises.length === 0) return null;
    return (
      <Disclosure
        key={block}
        summary={`${sentenceCase(blockWords[block])} (${exercises.length} ${exercises.length === 1 ? "exercise" : "exercises"})`}
      >
        <ol className="space-y-4">
          {exercises.map(({ position, name, dose, cue, progressions }) => (
            <li key={position}>
              <p>
                <strong className="font-medium">{name}</strong>
                <span className="text-soft">, {dose}</span>
              </p>
              <p className="max-w-prose">{cue}</p>
              {progressions.length > 0 ? (
                <p className="max-w-prose text-sm text-soft">Then: {progressions.join("; ")}</p>
              ) : null}
            </li>
          ))}
        </ol>
      </Disclosure>
    );
  });
}
