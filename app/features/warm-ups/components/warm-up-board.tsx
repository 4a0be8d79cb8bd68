import { type FormEvent, useEffect, useState } from "react";
import { countOf, sessionMoment, sessionTitle } from "~/features/sessions/session-words";
import { sentenceCase, skipReasonWords } from "~/features/vocabulary";
import type { FieldConflict, FieldValue } from "~/platform/merge-fields";
import {
  Button,
  ButtonLink,
  Field,
  Form,
  type FormErrors,
  type FormValues,
  Note,
  NumberInput,
  StrokeTally,
  TextInput,
} from "~/ui";
import { type SkipReason, warmUpBlocks } from "~db/schema/codes";
import type { Fields } from "../record-queue";
import { athleteField, blockField } from "../warm-up";
import type { WarmUpPage } from "../warm-up-page.server";
import { RecordConflict } from "./record-status";
import { SkipPanel } from "./skip-panel";
import { TakingPart } from "./taking-part";
import type { useWarmUpRecord } from "./use-warm-up-record";
import { WarmUpBlocks } from "./warm-up-blocks";

/** What came back from a form that was sent without script. */
export type PostedAnswer = {
  errors?: FormErrors;
  values?: FormValues;
  conflicts?: FieldConflict[];
  undo?: Record<string, FieldValue> | null;
};

type Props = { page: WarmUpPage; posted: PostedAnswer; record: ReturnType<typeof useWarmUpRecord> };

/** True once the page's script runs: until then every control is a plain form's. */
function useScript() {
  const [runs, setRuns] = useState(false);
  useEffect(() => setRuns(true), []);
  return runs;
}

/** The typed values of a form that was refused win over what is stored, until the script runs. */
function typedOver(shown: Fields, values: FormValues | undefined, page: WarmUpPage): Fields {
  if (!values) return shown;
  const has = (name: string, value: string) => [values[name] ?? []].flat().includes(value);
  return {
    ...shown,
    ...Object.fromEntries(warmUpBlocks.map((block) => [blockField(block), has("blocks", block)])),
    ...Object.fromEntries(page.athletes.map(({ id }) => [athleteField(id), has("athletes", id)])),
  };
}

const allBlocks = (on: boolean): Fields =>
  Object.fromEntries(warmUpBlocks.map((block) => [blockField(block), on]));

function Heading({ page }: { page: WarmUpPage }) {
  const { session } = page;
  return (
    <div className="mb-4">
      <p className="text-soft">
        {sessionMoment(session)}, {session.teamName}
      </p>
      <h1 className="text-xl">{sessionTitle(session)}</h1>
    </div>
  );
}

/** The warm-up of a session: one form that works without script, and saves each tick by itself with it. */
export function WarmUpBoard({ page, posted, record }: Props) {
  const script = useScript();
  const [minutesError, setMinutesError] = useState<string | null>(null);
  const shown = script ? record.shown : typedOver(record.shown, posted.values, page);
  const disabled = !page.mayWrite;
  const done = warmUpBlocks.map((block) => shown[blockField(block)] === true);
  const count = done.filter(Boolean).length;
  const skipped = typeof shown.skipReason === "string" ? (shown.skipReason as SkipReason) : null;
  const joining = page.athletes.filter(({ joins }) => joins).map(({ id }) => id);

  function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const { submitter } = event.nativeEvent as SubmitEvent;
    const intent = submitter instanceof HTMLButtonElement ? submitter.value : "save";
    if (intent === "all")
      record.changeWithUndo({
        ...allBlocks(true),
        skipReason: null,
        ...Object.fromEntries(joining.map((id) => [athleteField(id), true])),
      });
    if (intent === "unskip") record.change({ skipReason: null, skipNote: null });
    if (intent === "undo") record.undo?.();
    if (intent === "skip") {
      const form = new FormData(event.currentTarget);
      const reason = form.get("skipReason");
      if (typeof reason === "string")
        record.change({
          ...allBlocks(false),
          skipReason: reason,
          skipNote: String(form.get("skipNote") ?? "") || null,
        });
    }
  }

  function changeMinutes(text: string) {
    const typed = text.trim();
    const minutes = typed === "" ? null : Number(typed);
    const wrong = minutes !== null && !(Number.isInteger(minutes) && minutes >= 1 && minutes <= 90);
    setMinutesError(wrong ? "Enter whole minutes between 1 and 90, such as 15." : null);
    if (!wrong) record.change({ minutes });
  }

  return (
    <Form
      {...(posted.errors ? { errors: posted.errors } : {})}
      {...(posted.values ? { values: posted.values } : {})}
      idPrefix="warm-up"
      onSubmit={submit}
      className="max-w-[36rem]"
    >
      {/* The return key saves; without this it would press the first button of the form. */}
      <button type="submit" name="intent" value="save" tabIndex={-1} aria-hidden="true" className="hidden" />
      <input type="hidden" name="operationId" value={page.operationId} />
      <input type="hidden" name="base" value={JSON.stringify(page.base)} />
      <input type="hidden" name="listed" value={page.athletes.map(({ id }) => id).join(" ")} />
      <input type="hidden" name="joining" value={joining.join(" ")} />
      <Heading page={page} />
      <RecordConflict
        conflicts={script ? record.conflicts : (posted.conflicts ?? [])}
        athletes={page.athletes}
        {...(script ? { onDecide: (mine: boolean) => record.decide(record.conflicts, mine) } : {})}
      />
      {record.refusal ? (
        <Note kind="attention" role="alert" title="This was not saved">
          {record.refusal}
        </Note>
      ) : null}
      <div className="mb-5 flex justify-center sm:justify-start">
        <StrokeTally done={done} size="large" label={`${count} of ${warmUpBlocks.length} blocks done`} />
      </div>
      {skipped ? (
        <Note kind="attention" title={`Not done today: ${skipReasonWords[skipped]}`}>
          {typeof shown.skipNote === "string" ? <p>{sentenceCase(shown.skipNote)}</p> : null}
          {disabled ? null : (
            <Button size="large" name="intent" value="unskip">
              It was done after all
            </Button>
          )}
        </Note>
      ) : null}
      <WarmUpBlocks shown={shown} disabled={disabled} onChange={record.change} />
      {disabled ? null : (
        <Actions
          page={page}
          posted={posted}
          script={script}
          record={record}
          complete={count === 5}
          skipped={skipped !== null}
        />
      )}
      <TakingPart athletes={page.athletes} shown={shown} disabled={disabled} onChange={record.change} />
      <div className="mt-7 grid gap-x-6 sm:grid-cols-2">
        <Field
          name="minutes"
          label="Minutes"
          help={`The target is ${page.targetMinutes}.`}
          {...(minutesError ? { errors: [minutesError] } : {})}
        >
          <NumberInput
            size="large"
            unit="minutes"
            disabled={disabled}
            defaultValue={typeof page.base.minutes === "number" ? page.base.minutes : ""}
            onBlur={(event) => changeMinutes(event.currentTarget.value)}
          />
        </Field>
        <Field name="ledBy" label="Led by" help="A coach, a captain, a parent." optional>
          <TextInput
            size="large"
            maxLength={80}
            disabled={disabled}
            defaultValue={typeof page.base.ledBy === "string" ? page.base.ledBy : ""}
            onBlur={(event) => record.change({ ledBy: event.currentTarget.value.trim() || null })}
          />
        </Field>
      </div>
      {script || disabled ? null : (
        <Button look="primary" size="large" wide name="intent" value="save">
          Save the warm-up
        </Button>
      )}
    </Form>
  );
}

type ActionsProps = Props & { script: boolean; complete: boolean; skipped: boolean };

function Actions({ page, posted, script, record, complete, skipped }: ActionsProps) {
  const mayUndo = script ? record.undo !== null : Boolean(posted.undo);
  const joining = page.athletes.filter(({ joins }) => joins).length;
  return (
    <div className="mt-3.5 grid grid-cols-2 gap-2.5">
      {posted.undo ? <input type="hidden" name="undo" value={JSON.stringify(posted.undo)} /> : null}
      {mayUndo ? (
        <div className="col-span-2" role="status">
          <Button size="large" wide name="intent" value="undo">
            Undo: all blocks, everyone
          </Button>
        </div>
      ) : page.begun && !complete ? (
        <div className="col-span-2">
          <Button look="primary" size="large" wide name="intent" value="all">
            All blocks, everyone
          </Button>
          <p className="mt-1 text-sm text-soft">
            Ticks the five blocks and the {countOf(joining, "athlete")} whose restrictions allow it.
          </p>
        </div>
      ) : null}
      {skipped ? null : (
        <SkipPanel
          open={posted.values?.intent === "skip" && !script}
          {...(posted.errors?.fields.skipReason ? { error: posted.errors.fields.skipReason } : {})}
        />
      )}
      <ButtonLink size="large" wide to={page.reportAddress} reloadDocument={false}>
        Report an injury
      </ButtonLink>
    </div>
  );
}
