import type { NavItem } from "~/ui";
import type { Role } from "~db/schema/codes";
import { may, type Permission } from "./permissions";

const words: { path: string; label: string; needs: Permission; for: readonly Role[] }[] = [
  { path: "today", label: "Today", needs: "member", for: ["admin", "lead", "trainer", "coach"] },
  { path: "injuries", label: "Injuries", needs: "injuries.read", for: ["lead", "trainer"] },
  { path: "sessions", label: "Sessions", needs: "sessions.read", for: ["admin", "trainer", "coach"] },
  { path: "roster", label: "Roster", needs: "roster.read", for: ["admin", "lead", "trainer", "coach"] },
  { path: "rates", label: "Rates", needs: "rates.read", for: ["admin", "lead", "trainer"] },
  { path: "warm-ups", label: "Warm-ups", needs: "warm-ups.read", for: ["admin", "lead", "trainer", "coach"] },
  { path: "notices", label: "Notices", needs: "notices.read", for: ["lead", "trainer"] },
  { path: "imports", label: "Imports", needs: "imports", for: ["admin", "trainer"] },
  { path: "settings", label: "Settings", needs: "settings.read", for: ["admin", "lead"] },
];

/** The few addresses a person's roles use, as words; the season and team of the address go along. */
export function navigationFor(slug: string, roles: readonly Role[], search: string): NavItem[] {
  const kept = new URLSearchParams();
  const params = new URLSearchParams(search);
  for (const name of ["season", "team"]) {
    const value = params.get(name);
    if (value) kept.set(name, value);
  }
  const suffix = kept.size > 0 ? `?${kept}` : "";
  return words
    .filter(({ needs, for: users }) => may(roles, needs) && roles.some((role) => users.includes(role)))
    .map(({ path, label }) => ({ to: `/${slug}/${path}${suffix}`, label }));
}
