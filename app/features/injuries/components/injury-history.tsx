import { formatDay } from "~/platform/days";
import { Disclosure } from "~/ui";
import { withdrawWords } from "../summary";
import type { InjuryPage } from "./injury-facts";

type Stamped = { day: string; time: string; by?: string };

/** "Ines Test, 3 Mar 2026, 17:52". */
export function Signature({ day, time, by }: Stamped) {
  return (
    <span className="text-soft">
      {by ? `${by}, ` : ""}
      {formatDay(day)}, {time}
    </span>
  );
}

/** Every revision: who, when, and what it changed, before and after. */
export function InjuryHistory({ history }: Pick<InjuryPage, "history">) {
  return (
    <Disclosure
      summary={`${history.length === 1 ? "1 entry" : `${history.length} entries`}, nothing is overwritten`}
    >
      <ol className="max-w-3xl">
        {history.map((entry) => (
          <li key={entry.version} className="border-0 border-b border-line py-3 last:border-b-0">
            <p>
              <Signature {...entry} />
              {entry.version === 1 ? " logged the injury." : ""}
              {entry.reason ? ` Withdrawn: ${withdrawWords[entry.reason] ?? entry.reason}.` : ""}
            </p>
            {entry.changes.length > 0 ? (
              <ul className="mt-1 list-disc pl-6">
                {entry.changes.map(({ field, from, to }) => (
                  <li key={field}>
                    {field}: <del className="text-soft no-underline">{from}</del> to{" "}
                    <ins className="no-underline">{to}</ins>
                  </li>
                ))}
              </ul>
            ) : entry.version > 1 ? (
              <p>Saved without a change.</p>
            ) : null}
          </li>
        ))}
      </ol>
    </Disclosure>
  );
}
