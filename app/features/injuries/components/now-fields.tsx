import {
  bodyAreaWords,
  choicesOf,
  movementWords,
  sentenceCase,
  sessionKindWords,
  signWords,
} from "~/features/vocabulary";
import { ChoiceButtons, DateInput, Disclosure, Field, Select, type TargetSize, TimeInput } from "~/ui";
import { type SearchOption, SearchSelect } from "~/ui/search-select";
import type { SessionKind, Sign } from "~db/schema/codes";
import { signGroups } from "../cautions";
import { hasSides } from "../gaps";
import { type Answers, commonAreas, commonMovements } from "../seen";

export type SessionChoice = {
  id: string;
  kind: SessionKind;
  teamName: string;
  startTime: string | null;
};

type Props = {
  slug: string;
  answers: Answers;
  athlete: SearchOption | null;
  matches?: SearchOption[];
  /** The athlete's sessions of the day; empty while no athlete is chosen. */
  sessions: SessionChoice[];
  onAthlete: (athlete: SearchOption | null) => void;
  size?: TargetSize;
  /** The coach's report does not ask for the movement. */
  withMovement?: boolean;
};

const wordOf: Record<Sign, string> = {
  ...signWords,
  pop: "pop felt or heard",
  swelling: "swelling already",
  cannot_bear_weight: "cannot bear weight",
};
const signChoices = (group: readonly Sign[]) =>
  group.map((value) => ({ value, label: sentenceCase(wordOf[value]) }));

const movementChip: Record<string, string> = { cutting: "Cutting" };
const yesNo = [
  { value: "yes", label: "Yes" },
  { value: "no", label: "No" },
];
const otherAreas = choicesOf(bodyAreaWords).filter(({ value }) => !commonAreas.includes(value));
const otherMovements = choicesOf(movementWords).filter(({ value }) => !commonMovements.includes(value));

const sessionLabel = ({ kind, startTime, teamName }: SessionChoice, alone: boolean) => ({
  label: `This ${sessionKindWords[kind]}`,
  detail: alone ? (startTime ?? undefined) : [startTime, teamName].filter(Boolean).join(", "),
});

function whenChoices(sessions: SessionChoice[], athlete: SearchOption | null) {
  const own = sessions.map((session) => ({
    value: `session:${session.id}`,
    ...sessionLabel(session, sessions.length === 1),
  }));
  // Without a chosen athlete the session is not known yet: the server finds it.
  const unknown = athlete ? [] : [{ value: "today", label: "Today's session" }];
  return [
    ...own,
    ...unknown,
    { value: "earlier", label: sessions.length > 0 ? "Earlier" : "Today or earlier" },
    { value: "outside", label: "Not at the club" },
  ];
}

/** The first group of an injury, and what a coach reports: who, when, where on the body, what was seen. */
export function NowFields({ answers, size = "regular", withMovement = true, ...props }: Props) {
  const { slug, athlete, matches, sessions, onAthlete } = props;
  const when = whenChoices(sessions, athlete);
  const onHead = answers.bodyArea === "head" || answers.bodyArea === "neck" || answers.suspectedConcussion;
  const moreOpen = onHead || answers.signs.some((sign) => !signGroups.joint.includes(sign));
  return (
    <>
      <Field name="athlete" label="Athlete">
        <SearchSelect
          source={`/api/${slug}/athletes`}
          defaultOption={athlete}
          matches={matches}
          size={size}
          nothingFound="No athlete of that name. Try fewer letters."
          onSelect={onAthlete}
        />
      </Field>
      <div className="group/when">
        <ChoiceButtons
          key={sessions.map(({ id }) => id).join() || String(athlete === null)}
          name="when"
          legend="When"
          size={size}
          layout={when.length <= 3 ? "segments" : "chips"}
          choices={when}
          defaultValue={sessions.length === 1 ? `session:${sessions[0]?.id}` : undefined}
        />
        <div className="hidden group-has-[[value=earlier]:checked]/when:block group-has-[[value=outside]:checked]/when:block">
          <div className="flex flex-wrap gap-x-6">
            <Field name="day" label="Day" help="Such as 27 3 2026.">
              <DateInput size={size} />
            </Field>
            <Field name="time" label="Time" help="Such as 17:30." optional>
              <TimeInput size={size} />
            </Field>
          </div>
        </div>
      </div>
      <div className="group/area">
        <ChoiceButtons
          name="bodyArea"
          legend="Body area"
          size={size}
          choices={[
            ...commonAreas.map((value) => ({ value, label: sentenceCase(bodyAreaWords[value]) })),
            { value: "another", label: "Another area" },
          ]}
        />
        <div className="hidden group-has-[[value=another]:checked]/area:block">
          <Field name="otherArea" label="Which area">
            <Select options={otherAreas} placeholder="Choose the area" width="medium" size={size} />
          </Field>
        </div>
      </div>
      {answers.bodyArea === null || hasSides(answers.bodyArea) ? (
        <ChoiceButtons
          name="side"
          legend="Side"
          size={size}
          layout="segments"
          choices={[
            { value: "left", label: "Left" },
            { value: "right", label: "Right" },
            { value: "both", label: "Both" },
            { value: "unknown", label: "Not known" },
          ]}
        />
      ) : null}
      {withMovement ? (
        <div className="group/movement">
          <ChoiceButtons
            name="movement"
            legend="At that moment"
            optional
            size={size}
            choices={[
              ...commonMovements.map((value) => ({
                value,
                label: movementChip[value] ?? sentenceCase(movementWords[value]),
              })),
              { value: "another", label: "Something else" },
            ]}
          />
          <div className="hidden group-has-[[value=another]:checked]/movement:block">
            <Field name="otherMovement" label="Which movement" optional>
              <Select options={otherMovements} placeholder="Choose the movement" width="medium" size={size} />
            </Field>
          </div>
        </div>
      ) : null}
      <ChoiceButtons
        name="couldContinue"
        legend="Could they continue?"
        size={size}
        layout="segments"
        choices={yesNo}
      />
      <ChoiceButtons
        name="suspectedConcussion"
        legend="Suspected concussion?"
        size={size}
        layout="segments"
        choices={[...yesNo].reverse()}
        optional={answers.bodyArea !== "head"}
      />
      <ChoiceButtons
        name="signs"
        legend="Signs"
        optional
        mode="multiple"
        size={size}
        choices={signChoices(signGroups.joint)}
      />
      <Disclosure summary="Signs of an emergency: limb, head, neck" open={moreOpen}>
        <ChoiceButtons
          name="emergencySigns"
          legend="Of a limb"
          optional
          mode="multiple"
          size={size}
          choices={signChoices(signGroups.limb)}
        />
        <ChoiceButtons
          name="headSigns"
          legend="After a blow to the head or neck"
          optional
          mode="multiple"
          size={size}
          choices={signChoices(signGroups.head)}
        />
      </Disclosure>
    </>
  );
}
