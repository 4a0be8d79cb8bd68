import type { ComponentProps } from "react";
import { Link, type LinkProps } from "react-router";
import { joinClasses } from "./classes";

export type ButtonLook = "primary" | "secondary" | "quiet" | "danger";
/** `large` is 56 px high, for cold, wet or hurried hands; `regular` is 44 px. */
export type TargetSize = "regular" | "large";

const shape =
  "inline-flex items-center justify-center gap-2 rounded-md border text-center font-medium no-underline " +
  "transition-colors aria-busy:cursor-progress disabled:cursor-not-allowed disabled:border-dashed " +
  "disabled:border-edge disabled:bg-chalk disabled:text-soft";

const looks: Record<ButtonLook, string> = {
  primary: "border-lagoon bg-lagoon text-on-lagoon hover:border-lagoon-deep hover:bg-lagoon-deep",
  secondary: "border-edge bg-paper text-ink hover:bg-lagoon-wash",
  quiet: "border-transparent bg-transparent text-lagoon underline underline-offset-4 hover:bg-lagoon-wash",
  danger: "border-berry bg-berry text-on-berry hover:border-berry-deep hover:bg-berry-deep",
};

const sizes: Record<TargetSize, string> = {
  regular: "min-h-target px-4 py-1.5",
  large: "min-h-target-large px-5 py-2",
};

export type ButtonLooks = { look?: ButtonLook; size?: TargetSize; wide?: boolean };

/** Classes of a button, for the rare element that must look like one (a `label` over a file field). */
export function buttonClasses({ look = "secondary", size = "regular", wide = false }: ButtonLooks = {}) {
  return joinClasses(shape, looks[look], sizes[size], wide && "w-full");
}

type ButtonProps = ComponentProps<"button"> & ButtonLooks & { busy?: boolean };

/**
 * A button. `busy` keeps its words and its focus and says that it is working; it stays pressable for no one, so
 * that an impatient second press does not send twice.
 */
export function Button({ look, size, wide, busy = false, type = "submit", className, ...rest }: ButtonProps) {
  return (
    <button
      {...rest}
      type={type}
      aria-busy={busy || undefined}
      aria-disabled={busy || undefined}
      onClick={busy ? (event) => event.preventDefault() : rest.onClick}
      className={joinClasses(buttonClasses({ look, size, wide }), className)}
    />
  );
}

/** A link that looks like a button: for the next step, never for a change of data. */
export function ButtonLink({ look, size, wide, className, ...rest }: LinkProps & ButtonLooks) {
  return <Link {...rest} className={joinClasses(buttonClasses({ look, size, wide }), className)} />;
}
