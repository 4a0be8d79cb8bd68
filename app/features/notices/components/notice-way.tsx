import { joinClasses, SpotShape } from "~/ui";

export type ShownStep = { when: string; words: string; detail: string | null; trouble: boolean };

/** The way of a notice as a chalk line with a spot for each thing that happened; crossed where something went wrong. */
export function NoticeWay({ steps }: { steps: ShownStep[] }) {
  return (
    <ol className="relative max-w-prose">
      {steps.map((step, index) => {
        const last = index === steps.length - 1;
        return (
          // biome-ignore lint/suspicious/noArrayIndexKey: history does not move
          <li key={index} className="relative grid grid-cols-[1.5rem_1fr] gap-3 pb-4">
            {last ? null : (
              <span
                aria-hidden="true"
                className="absolute top-6 bottom-[-0.25rem] left-[0.7rem] border-0 border-l border-line"
              />
            )}
            <SpotShape
              spot={step.trouble ? "crossed" : "filled"}
              className={joinClasses(
                "relative top-[0.2rem] h-[1.15rem] w-[1.15rem]",
                step.trouble && "text-berry",
              )}
            />
            <div>
              <p className={joinClasses(last && "font-semibold")}>
                {step.words} <span className="font-normal text-soft">{step.when}</span>
              </p>
              {step.detail ? <p className="mt-0.5 whitespace-pre-line text-soft">{step.detail}</p> : null}
            </div>
          </li>
        );
      })}
    </ol>
  );
}
