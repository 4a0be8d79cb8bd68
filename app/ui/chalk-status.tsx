import type { ReactNode } from "react";
import { joinClasses } from "./classes";

type Props = {
  /** Broken while something waits, solid when all is kept. */
  line: "broken" | "solid";
  children?: ReactNode;
};

/** The chalk line under the bar. It is announced politely when its words change. */
export function ChalkStatus({ line, children }: Props) {
  return (
    <div role="status" data-furniture>
      <div aria-hidden="true" className="h-1.5 bg-bar">
        <div
          className={joinClasses("h-full", line === "solid" && "bg-sand")}
          style={
            line === "broken"
              ? {
                  background:
                    "repeating-linear-gradient(90deg, var(--color-sand) 0 18px, transparent 18px 30px)",
                }
              : undefined
          }
        />
      </div>
      {children ? (
        <div className={line === "broken" ? "bg-ember-wash text-ink" : "bg-paper text-soft"}>
          <p className="mx-auto max-w-page px-4 py-2.5 sm:px-6 xl:px-0">{children}</p>
        </div>
      ) : null}
    </div>
  );
}
