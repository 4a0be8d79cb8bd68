import type { ReactNode } from "react";
import { joinClasses } from "./classes";

export type NoteKind = "info" | "attention" | "serious" | "settled";

const kinds: Record<NoteKind, { box: string; title: string }> = {
  info: { box: "border-lagoon bg-lagoon-wash", title: "text-lagoon" },
  attention: { box: "border-ember bg-ember-wash", title: "text-ember" },
  serious: { box: "border-berry bg-berry-wash", title: "text-berry" },
  settled: { box: "border-moss bg-moss-wash", title: "text-moss" },
};

type Props = {
  kind?: NoteKind;
  title?: ReactNode;
  children?: ReactNode;
  /** `status` or `alert` when the note appears after an action; none when it was there from the start. */
  role?: "status" | "alert";
  id?: string;
};

/** A caution or a message where the decision is taken: one or two plain sentences beside a bar. */
export function Note({ kind = "info", title, children, role, id }: Props) {
  const { box, title: titleColour } = kinds[kind];
  return (
    <div
      id={id}
      role={role}
      data-keep-together
      className={joinClasses("my-4 max-w-prose border-0 border-l-[6px] px-4 py-3", box)}
    >
      {title ? <p className={joinClasses("font-semibold", titleColour)}>{title}</p> : null}
      {children ? <div className="space-y-2">{children}</div> : null}
    </div>
  );
}
