import { formatDay } from "~/platform/days";
import { Field, NumberInput, Select, TextInput } from "~/ui";
import type { Answers, Reading } from "../imports.schema";
import { dayOrderWords, delimiterWords, encodingWords } from "./words";

type Props = { reading: Reading; answers: Answers; withDays?: boolean };

const options = (words: Record<string, string>) =>
  Object.entries(words).map(([value, label]) => ({ value, label }));

const dayOrders = [
  { value: "day-first", label: "day first, as 27.3.2014" },
  { value: "month-first", label: "month first, as 3/27/2014" },
];

/** How the file was read, each part changeable; the first rows beside it show whether it is right. */
export function ReadingFields({ reading, answers, withDays = true }: Props) {
  const asks = withDays && reading.dayOrder !== "iso";
  return (
    <>
      <Field
        name="encoding"
        label="Encoding"
        help={reading.encodingSure ? undefined : "Not certain: check that accented letters below look right."}
      >
        <Select
          options={options(encodingWords)}
          defaultValue={answers.encoding ?? reading.encoding}
          width="medium"
        />
      </Field>
      <Field
        name="delimiter"
        label="Cells are parted by"
        help={reading.delimiterSure ? undefined : "Not certain: check that the columns below are right."}
      >
        <Select
          options={options(delimiterWords)}
          defaultValue={answers.delimiter ?? reading.delimiter}
          width="medium"
        />
      </Field>
      <Field name="headerLine" label="Line of the headings" help="Lines above it are left out.">
        <NumberInput defaultValue={answers.headerLine ?? reading.headerLine} width="short" />
      </Field>
      {asks ? (
        <Field name="dayOrder" label="Days are written">
          <Select
            options={dayOrders}
            {...(reading.dayOrder in dayOrderWords && reading.dayOrder.endsWith("first")
              ? {}
              : { placeholder: "Not said yet" })}
            defaultValue={answers.dayOrder ?? reading.dayOrder}
            width="medium"
          />
        </Field>
      ) : null}
      {reading.fromDay ? (
        <Field
          name="fromDay"
          label="First day in the team"
          help="For rows that do not say it. Memberships that are there already keep their day."
        >
          <TextInput defaultValue={formatDay(reading.fromDay)} width="short" autoComplete="off" />
        </Field>
      ) : null}
    </>
  );
}

/** The first lines of the table as they were read. */
export function SampleTable({ reading }: { reading: Reading }) {
  // The place is what tells columns apart: headings may repeat.
  const places = reading.header.map((text, index) => ({ text, index, key: `column ${index}` }));
  return (
    // biome-ignore lint/a11y/useSemanticElements: a scrolled box is no section of the page
    <div
      role="region"
      aria-label="The first rows as they were read"
      // biome-ignore lint/a11y/noNoninteractiveTabindex: who has no pointer scrolls it with the arrow keys
      tabIndex={0}
      className="my-4 overflow-x-auto"
    >
      <table className="border-collapse">
        <caption className="pb-1 text-left font-semibold">The first rows as they were read</caption>
        <thead>
          <tr className="border-0 border-b border-edge">
            {places.map(({ text, key }) => (
              <th
                key={key}
                scope="col"
                className="py-1 pr-6 text-left font-medium whitespace-nowrap text-soft"
              >
                {text || "–"}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {reading.sample.map(({ line, cells }) => (
            <tr key={line} className="border-0 border-b border-line">
              {places.map(({ index, key }) => (
                <td key={key} className="max-w-[16rem] truncate py-1 pr-6 whitespace-nowrap">
                  {cells[index]}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
