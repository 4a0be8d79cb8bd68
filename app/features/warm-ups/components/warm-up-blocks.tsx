import { blockWords, sentenceCase } from "~/features/vocabulary";
import { warmUpBlocks } from "~db/schema/codes";
import type { Fields } from "../record-queue";
import { blockField } from "../warm-up";

type Props = { shown: Fields; disabled: boolean; onChange: (fields: Fields) => void };

const face =
  "relative flex min-h-target-large w-full cursor-pointer items-center gap-2 rounded-md border border-edge bg-paper px-3.5 py-2 " +
  "leading-tight select-none hover:bg-lagoon-wash has-checked:border-lagoon has-checked:bg-lagoon has-checked:text-on-lagoon has-checked:hover:bg-lagoon " +
  "has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-focus " +
  "has-disabled:cursor-not-allowed has-disabled:border-dashed";

/** The five blocks as large tick boxes under their own words. */
export function WarmUpBlocks({ shown, disabled, onChange }: Props) {
  return (
    <fieldset>
      <legend className="sr-only">Blocks done</legend>
      <div className="grid grid-cols-2 gap-2.5">
        {warmUpBlocks.map((block) => (
          <label key={block} className={face}>
            <input
              type="checkbox"
              name="blocks"
              value={block}
              checked={shown[blockField(block)] === true}
              disabled={disabled}
              onChange={(event) =>
                onChange({ [blockField(block)]: event.currentTarget.checked, skipReason: null })
              }
              className="peer absolute inset-0 h-full w-full cursor-pointer opacity-0"
            />
            <span aria-hidden="true" className="hidden peer-checked:inline">
              ✓
            </span>
            {sentenceCase(blockWords[block])}
          </label>
        ))}
      </div>
    </fieldset>
  );
}
