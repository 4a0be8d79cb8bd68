import { LinkRow, TextLink } from "~/ui";

const pages = [
  { path: "", label: "Organisation" },
  { path: "/people", label: "People" },
  { path: "/teams", label: "Teams" },
  { path: "/seasons", label: "Seasons" },
  { path: "/venues", label: "Venues" },
];

/** The pages of the settings, as words under the heading; the one that is open is no link. */
export function SettingsLinks({ base, here }: { base: string; here: string }) {
  return (
    <nav aria-label="Settings" className="mb-6 border-0 border-b border-line pb-2">
      <LinkRow>
        {pages.map(({ path, label }) =>
          label === here ? (
            <strong
              key={path}
              aria-current="page"
              className="inline-flex min-h-target items-center font-medium"
            >
              {label}
            </strong>
          ) : (
            <TextLink
              key={path}
              to={`${base}/settings${path}`}
              className="inline-flex min-h-target items-center"
            >
              {label}
            </TextLink>
          ),
        )}
      </LinkRow>
    </nav>
  );
}
