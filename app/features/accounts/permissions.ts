import type { Role } from "~db/schema/codes";

/**
 * Who may do what. One table, used by the server to decide and by pages to hide. Whether "own teams" or all teams
 * are meant is not here: it is the membership's list, applied by every query (see visibleTeams in the scope).
 */
export const permissions = {
  /** Every member: the frame, today's page, their own account. */
  member: ["admin", "lead", "trainer", "coach"],
  "people.manage": ["admin"],
  "people.read": ["admin", "lead"],
  "people.confirm": ["lead"],
  "settings.read": ["admin", "lead", "trainer"],
  "settings.write": ["admin"],
  "roster.read": ["admin", "lead", "trainer", "coach"],
  "roster.write": ["admin", "lead", "trainer"],
  /** Dates of birth, guardians and their addresses. */
  "roster.contacts": ["admin", "lead", "trainer"],
  "sessions.read": ["admin", "lead", "trainer", "coach"],
  "sessions.write": ["admin", "lead", "trainer"],
  /** Adding today's session, who took part, minutes. */
  "attendance.write": ["admin", "lead", "trainer", "coach"],
  imports: ["admin", "lead", "trainer"],
  "injuries.read": ["lead", "trainer"],
  "injuries.write": ["lead", "trainer"],
  "coach-reports.send": ["coach", "trainer", "lead"],
  "coach-reports.read": ["lead", "trainer"],
  /** State of today; restrictions and the expected date are for those who act on them. */
  "availability.status": ["admin", "lead", "trainer", "coach"],
  "availability.restrictions": ["lead", "trainer", "coach"],
  "availability.write": ["lead", "trainer"],
  "warm-ups.read": ["admin", "lead", "trainer", "coach"],
  "warm-ups.write": ["lead", "trainer", "coach"],
  "rates.read": ["admin", "lead", "trainer"],
  /** Whole tables with small cells and free filters. Others see fixed tables with small cells hidden. */
  "rates.clinical": ["lead", "trainer"],
  /** What the programme is judged by, for the whole organisation. */
  "rates.plan": ["lead"],
  "notices.read": ["lead", "trainer"],
  "notices.send": ["lead", "trainer"],
  "audit.read": ["admin", "lead"],
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof permissions;

export function may(roles: readonly Role[], permission: Permission): boolean {
  const allowed: readonly Role[] = permissions[permission];
  return roles.some((role) => allowed.includes(role));
}

/** Roles that touch clinical records: granted only with a lead's confirmation. */
export const clinicalRoles: readonly Role[] = ["lead", "trainer"];

export const roleNames: Record<Role, string> = {
  admin: "club administrator",
  lead: "medical lead",
  trainer: "athletic trainer",
  coach: "coach",
};
