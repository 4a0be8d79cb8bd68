import type { ReactNode } from "react";
import { Link, type LinkProps } from "react-router";
import { joinClasses } from "./classes";

/** A link in running text. */
export function TextLink({ className, ...rest }: LinkProps) {
  return (
    <Link
      {...rest}
      className={joinClasses(
        "text-lagoon underline decoration-from-font underline-offset-[0.18em] hover:text-lagoon-deep hover:decoration-2",
        className,
      )}
    />
  );
}

/** A row of links at the foot of a table or a region; each is tall enough for a finger. */
export function LinkRow({ children }: { children: ReactNode }) {
  return (
    <p className="flex flex-wrap items-center gap-x-6 [&>a]:inline-flex [&>a]:min-h-target [&>a]:items-center">
      {children}
    </p>
  );
}
