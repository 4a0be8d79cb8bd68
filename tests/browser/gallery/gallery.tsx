import type { ReactNode } from "react";
import { Route, Routes } from "react-router";
import {
  Attention,
  Button,
  ButtonLink,
  ChalkStatus,
  Checkbox,
  ChoiceButtons,
  ConfirmButton,
  DateInput,
  DescriptionList,
  Disclosure,
  EmptyState,
  ErrorSummary,
  Field,
  Fieldset,
  FileInput,
  FormActions,
  Interval,
  Lede,
  LinkRow,
  NavLinks,
  NoRate,
  Note,
  NumberInput,
  niceScale,
  Page,
  PageHeading,
  Pager,
  RateAxis,
  RateBar,
  Region,
  Select,
  SkipLink,
  SpotMark,
  StrokeTally,
  TextArea,
  TextInput,
  TextLink,
  TimeInput,
  TopBar,
} from "~/ui";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { type Column, DataTable } from "~/ui/data-table";
import { FormContext } from "~/ui/form-context";
import { SearchSelect } from "~/ui/search-select";

type Row = {
  group: string;
  events: number;
  exposures: number;
  rate: { estimate: number; lower: number; upper: number } | null;
  series: 1 | 2;
};

const rows: Row[] = [
  {
    group: "Girls, 15 to 16",
    events: 18,
    exposures: 4090,
    rate: { estimate: 4.4, lower: 2.6, upper: 7 },
    series: 1,
  },
  {
    group: "Boys, 15 to 16",
    events: 13,
    exposures: 5905,
    rate: { estimate: 2.2, lower: 1.2, upper: 3.8 },
    series: 2,
  },
  {
    group: "Girls, 19 to 25",
    events: 3,
    exposures: 1112,
    rate: { estimate: 2.7, lower: 0.6, upper: 7.9 },
    series: 1,
  },
  { group: "Boys, 19 to 25", events: 0, exposures: 0, rate: null, series: 2 },
];
const scale = niceScale(7.9);

const columns: Column<Row>[] = [
  { id: "group", header: "Group", value: (row) => row.group, rowHeader: true },
  { id: "events", header: "Injuries", value: (row) => row.events, numeric: true },
  {
    id: "exposures",
    header: "Exposures",
    value: (row) => row.exposures,
    cell: (row) => row.exposures.toLocaleString("en-GB"),
    numeric: true,
  },
  {
    id: "rate",
    header: "Rate",
    value: (row) => row.rate?.estimate,
    cell: (row) => row.rate?.estimate.toFixed(1) ?? "–",
    numeric: true,
  },
  {
    id: "interval",
    header: "95 % interval",
    cell: (row) =>
      row.rate ? (
        `${row.rate.lower.toFixed(1)} to ${row.rate.upper.toFixed(1)}`
      ) : (
        <NoRate reason="no exposure" />
      ),
  },
  {
    id: "picture",
    header: "Picture",
    headerPicture: <RateAxis scale={scale} label="Rate with its interval" />,
    axis: true,
    cell: (row) => (
      <RateBar
        rate={row.rate}
        reason="no exposure"
        scale={scale}
        series={row.series}
        unstable={row.events < 5}
        unit="per 1000"
      />
    ),
  },
];

const rate = (estimate: number, lower: number, upper: number) => ({ estimate, lower, upper });
const groups = [
  {
    label: "13 to 14",
    points: [
      { series: 1 as const, label: "girls", rate: rate(2.2, 0.8, 4.4) },
      { series: 2 as const, label: "boys", rate: rate(1.6, 0.5, 3.2) },
    ],
  },
  {
    label: "15 to 16",
    points: [
      { series: 1 as const, label: "girls", rate: rate(4.4, 2.6, 7) },
      { series: 2 as const, label: "boys", rate: rate(2.2, 1.2, 3.8) },
    ],
  },
  {
    label: "17 to 18",
    points: [
      { series: 1 as const, label: "girls", rate: rate(4.5, 2.4, 9.8) },
      { series: 2 as const, label: "boys", rate: null, note: "no exposure recorded" },
    ],
  },
  {
    label: "19 to 25",
    points: [
      {
        series: 1 as const,
        label: "girls",
        rate: rate(2.7, 1.1, 7.9),
        unstable: true,
        note: "3 injuries: unstable",
      },
      {
        series: 2 as const,
        label: "boys",
        rate: rate(1.6, 0.2, 5.7),
        unstable: true,
        note: "2 injuries: unstable",
      },
    ],
  },
];
const months = ["Aug", "Sep", "Oct", "Nov", "Dec", "Jan", "Feb", "Mar", "Apr", "May"];

const people = [
  { id: "a1", label: "Tova Inchmere", detail: "girls under 16" },
  { id: "a2", label: "Tova Larkfield", detail: "girls under 14" },
  { id: "a3", label: "Runa Penhallow", detail: "girls under 16" },
];
const findPeople = async (query: string) =>
  people.filter(({ label }) => label.toLowerCase().includes(query.toLowerCase()));

const errors = {
  form: ["Someone else changed this record at 17:40. Your entries are below."],
  fields: {
    name: ["Write the athlete's family name."],
    born: ["This could be two different days. Write the month as a word, like 27 Mar 2014."],
    side: ["Choose a side."],
    agree: ["Tick this to go on."],
  },
};

function Frame({ children }: { children: ReactNode }) {
  return (
    <>
      <SkipLink />
      <TopBar
        name="Haleside"
        home="/"
        scope={
          <p>
            <a
              href="#club"
              className="font-medium text-on-bar underline decoration-dotted underline-offset-4"
            >
              Marram Bay Athletic
            </a>
            , season <strong>2026/27</strong>, all teams
          </p>
        }
        person="Ines Calloway, medical lead"
      />
      <NavLinks
        items={["Today", "Injuries", "Return to sport", "Rates", "Warm-ups", "Notices", "Reports"].map(
          (label) => ({
            label,
            to: label === "Rates" ? "/" : `/${label}`,
            end: true,
          }),
        )}
      />
      {children}
    </>
  );
}

function Figures() {
  return (
    <Page>
      <p className="mb-6 text-soft">
        Showing{" "}
        <a href="#case" className="editable-word">
          all injuries with time loss
        </a>{" "}
        in{" "}
        <a href="#kind" className="editable-word">
          training and matches
        </a>
        , per{" "}
        <a href="#per" className="editable-word">
          1000 athlete-exposures
        </a>
      </p>
      <Lede
        as="h1"
        note={
          <>
            91 % of held sessions have recorded exposure. <Attention>Two groups are unstable</Attention>:
            fewer than 5 injuries. Time loss of a day or more, training and matches.
          </>
        }
      >
        Girls had <strong>31 injuries in 9,840 exposures</strong>, <strong>3.2 per 1000</strong>{" "}
        <Interval lower="2.1" upper="4.5" />. That is <strong>1.6 times</strong> the boys' rate{" "}
        <Interval lower="0.98" upper="2.6" />; the interval includes no difference.
      </Lede>
      <Region>
        <IntervalChart
          groups={groups}
          unit="per 1000"
          title="Rates by age"
          reference={{ value: 2.5, label: "club 2.5" }}
        />
        <DataTable
          caption="Injuries with time loss per 1000 athlete-exposures, 2026/27"
          columns={columns}
          rows={rows}
          rowKey={(row) => row.group}
          empty="No group has exposure yet."
          defaultSort="-events"
          csvHref="/rates.csv"
        />
        <LinkRow>
          <TextLink to="/injuries">The 31 injuries behind it</TextLink>
          <TextLink to="/how">How this is computed</TextLink>
        </LinkRow>
      </Region>
      <Region heading="By month">
        <LineWithBand
          periods={months}
          unit="per 1000 athlete-exposures"
          title="Rates by month"
          reference={{ value: 2.5, label: "last season 2.5" }}
          series={[
            {
              series: 1,
              label: "girls",
              points: months.map((_, i) =>
                i === 4
                  ? null
                  : { ...rate(3 + Math.sin(i), 2 + Math.sin(i), 4.6 + Math.sin(i)), unstable: i === 8 },
              ),
            },
            {
              series: 2,
              label: "boys",
              points: months.map((_, i) =>
                rate(2 + Math.cos(i) / 2, 1.2 + Math.cos(i) / 2, 3.1 + Math.cos(i) / 2),
              ),
            },
          ]}
        />
        <Pager page={2} pageSize={20} total={312} what="athletes" />
      </Region>
    </Page>
  );
}

function Words() {
  return (
    <Page>
      <PageHeading
        above="Tuesday 1 December, 17:30"
        below="A pitch by the sea; the surface is artificial turf."
        actions={
          <ButtonLink to="/new" look="primary">
            Add a session
          </ButtonLink>
        }
      >
        Training, artificial turf
      </PageHeading>
      <div className="flex flex-wrap items-start gap-3">
        <Button look="primary">Save</Button>
        <Button>Not done today</Button>
        <Button look="quiet">Leave it</Button>
        <Button look="danger">End membership</Button>
        <Button look="primary" size="large" busy>
          All blocks, everyone
        </Button>
        <ConfirmButton
          label="Delete draft"
          question="The draft goes for good. The session stays."
          confirmLabel="Delete the draft"
        />
      </div>
      <div className="my-6 flex flex-wrap items-center gap-8">
        <StrokeTally size="large" done={[true, true, true, false, false]} />
        <StrokeTally size="large" done={[true, true, true, true, true]} />
        <span className="flex flex-wrap gap-4">
          {Object.entries({ a: 5, b: 4, c: 2, d: 0, e: 5, f: 3 }).map(([week, count]) => (
            <StrokeTally key={week} done={[0, 1, 2, 3, 4].map((n) => n < count)} />
          ))}
        </span>
      </div>
      <ul className="space-y-3">
        <li>
          <SpotMark spot="filled">Full</SpotMark>
        </li>
        <li>
          <SpotMark spot="half" detail="Straight running only. As of 15:10">
            Modified
          </SpotMark>
        </li>
        <li>
          <SpotMark spot="crossed" detail="As of 15:10">
            Unavailable
          </SpotMark>
        </li>
        <li>
          <SpotMark spot="ring">Suspected</SpotMark>
        </li>
      </ul>
      <Note kind="serious" title="Treat as a serious knee injury">
        Out for today. No weight on the leg. Immobilise, compress and cool. A physician should see them as
        soon as possible.
      </Note>
      <Note kind="attention" title="Recorded exposure is low">
        Fewer than half of the sessions have it.
      </Note>
      <Note kind="settled">All is saved.</Note>
      <Note title="Who sees this">Clinical roles only.</Note>
      <EmptyState
        title="Sessions belong here"
        actions={
          <>
            <ButtonLink to="/n" look="primary">
              Add a session
            </ButtonLink>
            <TextLink to="/s">A sample file</TextLink>
          </>
        }
      >
        <p>
          A rate needs to know how often athletes trained and played. Add sessions one by one or bring a file.
        </p>
      </EmptyState>
      <DescriptionList
        items={[
          { term: "Body area", detail: "Knee, left" },
          { term: "Onset", detail: "27 Mar 2014, in training" },
        ]}
      />
      <Disclosure summary="How this is computed">
        <p>Exact limits for a rate.</p>
      </Disclosure>
    </Page>
  );
}

function Forms() {
  return (
    <Page width="form">
      <PageHeading below="Draft kept at 17:52">Log an injury</PageHeading>
      <form noValidate method="post">
        <ErrorSummary errors={errors} />
        <FormContext
          value={{ errors, values: { born: "03/04/2015", name: "", signs: ["pop"] }, idPrefix: "field" }}
        >
          <Field name="athlete" label="Athlete">
            <SearchSelect load={findPeople} />
          </Field>
          <Field name="name" label="Family name">
            <TextInput />
          </Field>
          <Field name="born" label="Date of birth" help="Day, month and year, for example 27 3 2014.">
            <DateInput />
          </Field>
          <Field name="at" label="Time">
            <TimeInput defaultValue="17:30" />
          </Field>
          <Field name="minutes" label="Minutes" optional>
            <NumberInput unit="minutes" />
          </Field>
          <Field name="team" label="Team">
            <Select placeholder="Choose a team" options={[{ value: "1", label: "Girls under 16" }]} />
          </Field>
          <ChoiceButtons
            name="when"
            legend="When"
            layout="segments"
            defaultValue="now"
            choices={[
              { value: "now", label: "This training" },
              { value: "earlier", label: "Earlier" },
              { value: "out", label: "Not at the club" },
            ]}
          />
          <ChoiceButtons
            name="side"
            legend="Side"
            layout="segments"
            choices={[
              { value: "l", label: "Left" },
              { value: "r", label: "Right" },
              { value: "b", label: "Both" },
            ]}
          />
          <ChoiceButtons
            name="signs"
            legend="Signs"
            mode="multiple"
            help="Choose all that apply."
            size="large"
            choices={[
              { value: "pop", label: "Pop felt or heard" },
              { value: "swelling", label: "Swelling already" },
              { value: "weight", label: "Cannot bear weight" },
              { value: "locked", label: "Locked", disabled: true },
            ]}
          />
          <Fieldset legend="What else" help="This can wait.">
            <Field name="words" label="In words" optional>
              <TextArea />
            </Field>
            <Field name="file" label="A document" help="PDF or photo, at most 10 MB.">
              <FileInput />
            </Field>
            <Checkbox
              name="agree"
              label="The guardian has been told by phone"
              help="Phone first; the notice confirms."
            />
          </Fieldset>
          <FormActions note="Five details can wait.">
            <Button look="primary" size="large">
              Save now, complete later
            </Button>
            <Button look="quiet">Leave it</Button>
          </FormActions>
        </FormContext>
      </form>
    </Page>
  );
}

/** Every part on three pages, with invented words, to look at. */
export function Gallery() {
  return (
    <Frame>
      <Routes>
        <Route path="/" element={<Figures />} />
        <Route
          path="/words"
          element={
            <>
              <ChalkStatus line="broken">
                No signal. 3 entries wait on this phone; nothing is lost.
              </ChalkStatus>
              <Words />
            </>
          }
        />
        <Route
          path="/forms"
          element={
            <>
              <ChalkStatus line="solid">All is saved.</ChalkStatus>
              <Forms />
            </>
          }
        />
      </Routes>
    </Frame>
  );
}
