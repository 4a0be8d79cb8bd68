import { spotOf } from "~/features/availability/state-words";
import { blockWords } from "~/features/vocabulary";
import { SpotMark } from "~/ui";
import type { Fields } from "../record-queue";
import { athleteField } from "../warm-up";
import type { WarmUpPage } from "../warm-up-page.server";

type Athlete = WarmUpPage["athletes"][number];
type Props = {
  athletes: readonly Athlete[];
  shown: Fields;
  disabled: boolean;
  onChange: (fields: Fields) => void;
};

/** What a coach may know: state and restrictions, the blocks to leave out, what the family lets coaches see. */
function Detail({ athlete }: { athlete: Athlete }) {
  const { words, leavesOut, alerts, state } = athlete;
  const out = state === "unavailable" ? [] : leavesOut;
  if (!words && alerts.length === 0) return null;
  return (
    <>
      {words ? <span className="block">{words}</span> : null}
      {out.length > 0 ? (
        <span className="block">Leaves out {out.map((block) => blockWords[block]).join(", ")}</span>
      ) : null}
      {alerts.map((alert) => (
        <span key={alert} className="block font-medium text-ember">
          {alert}
        </span>
      ))}
    </>
  );
}

/** Who took part in the warm-up: the whole row is the target, the square shows the tick. */
export function TakingPart({ athletes, shown, disabled, onChange }: Props) {
  const ticked = athletes.filter(({ id }) => shown[athleteField(id)] === true).length;
  return (
    <fieldset className="mt-7">
      <legend className="contents">
        <span className="flex w-full items-baseline justify-between border-0 border-b border-line pb-2">
          <span className="font-semibold">Took part in the warm-up</span>
          <span className="text-soft">
            {ticked} of {athletes.length}
          </span>
        </span>
      </legend>
      <ul>
        {athletes.map((athlete) => (
          <li key={athlete.id} className="border-0 border-b border-line">
            <label className="group relative flex min-h-target-large cursor-pointer items-center justify-between gap-3 py-1.5">
              <SpotMark spot={spotOf[athlete.state]} detail={<Detail athlete={athlete} />}>
                {athlete.givenName} {athlete.familyName}
                {athlete.guest ? <span className="text-soft"> (guest)</span> : null}
              </SpotMark>
              <input
                type="checkbox"
                name="athletes"
                value={athlete.id}
                checked={shown[athleteField(athlete.id)] === true}
                disabled={disabled}
                onChange={(event) => onChange({ [athleteField(athlete.id)]: event.currentTarget.checked })}
                className="absolute inset-0 h-full w-full cursor-pointer opacity-0"
              />
              <span
                aria-hidden="true"
                className="flex h-14 w-14 shrink-0 items-center justify-center rounded-md border border-edge bg-paper text-transparent group-has-checked:bg-ink group-has-checked:text-chalk group-has-disabled:border-dashed group-has-focus-visible:outline-3 group-has-focus-visible:outline-offset-2 group-has-focus-visible:outline-focus"
              >
                ✓
              </span>
            </label>
          </li>
        ))}
      </ul>
    </fieldset>
  );
}
