/** The first thing the Tab key reaches on every page. `Page` carries the target. */
export function SkipLink({
  to = "main",
  children = "Skip to the content",
}: {
  to?: string;
  children?: string;
}) {
  return (
    <a
      href={`#${to}`}
      data-furniture
      className="sr-only rounded-md bg-paper px-4 py-3 text-ink shadow-float focus:not-sr-only focus:fixed focus:top-2 focus:left-2 focus:z-50"
    >
      {children}
    </a>
  );
}
