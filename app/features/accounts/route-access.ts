import type { Permission } from "./permissions";

/**
 * Who may reach each address, by its pattern and method. The middleware refuses what is not named here, and the
 * matrix test walks app/routes.ts against this table, so that a new route cannot be forgotten.
 * `public`: no sign-in. `person`: signed in. Otherwise a member of the organisation with the permission.
 */
export type Access = "public" | "person" | Permission;

type RouteAccess = { get?: Access; post?: Access };

export const routeAccess: Record<string, RouteAccess> = {
  "/": { get: "public" },
  "/sign-in": { get: "public", post: "public" },
  "/sign-out": { post: "person" },
  "/forgot-password": { get: "public", post: "public" },
  "/reset-password": { get: "public", post: "public" },
  "/verify-email": { get: "public", post: "public" },
  "/organisations": { get: "person" },
  "/account": { get: "person", post: "person" },
  "/invitations/:organisationId/:token": { get: "public", post: "public" },
  "/families/:organisationId/:token": { get: "public", post: "public" },
  "/webhooks/mail": { post: "public" },
  "/health": { get: "public" },
  "/:organisation": { get: "member" },
  "/:organisation/today": { get: "member" },
  "/:organisation/today/day-list": { get: "availability.restrictions" },
  "/:organisation/roster": { get: "roster.read" },
  "/:organisation/roster/new": { get: "roster.write", post: "roster.write" },
  "/:organisation/roster/:athlete": { get: "roster.read", post: "roster.write" },
  "/:organisation/roster/:athlete/edit": { get: "roster.write", post: "roster.write" },
  "/:organisation/roster/:athlete/guardians": { get: "roster.contacts", post: "roster.write" },
  "/:organisation/roster/:athlete/availability": { get: "availability.write", post: "availability.write" },
  "/:organisation/sessions": { get: "sessions.read" },
  "/:organisation/sessions/new": { get: "attendance.write", post: "attendance.write" },
  "/:organisation/sessions/:session": { get: "sessions.read", post: "attendance.write" },
  "/:organisation/sessions/:session/attendance": { get: "attendance.write", post: "attendance.write" },
  "/:organisation/sessions/:session/warm-up": { get: "warm-ups.read", post: "warm-ups.write" },
  "/:organisation/injuries": { get: "injuries.read" },
  "/:organisation/injuries/new": { get: "injuries.write", post: "injuries.write" },
  "/:organisation/injuries/draft": { post: "injuries.write" },
  "/:organisation/injuries/export.csv": { get: "injuries.read" },
  "/:organisation/injuries/:injury": { get: "injuries.read", post: "injuries.write" },
  "/:organisation/injuries/:injury/edit": { get: "injuries.write", post: "injuries.write" },
  "/:organisation/injuries/:injury/notice": { get: "notices.send", post: "notices.send" },
  "/:organisation/report-injury": { get: "coach-reports.send", post: "coach-reports.send" },
  "/:organisation/coach-reports": { get: "coach-reports.read" },
  "/:organisation/coach-reports/:report": { get: "coach-reports.read", post: "injuries.write" },
  "/:organisation/encounters/new": { get: "injuries.write", post: "injuries.write" },
  "/:organisation/warm-ups": { get: "warm-ups.read" },
  "/:organisation/rates": { get: "rates.read" },
  "/:organisation/rates.csv": { get: "rates.read" },
  "/:organisation/rates/severity": { get: "rates.clinical" },
  "/:organisation/rates/prevalence": { get: "rates.clinical" },
  "/:organisation/rates/body-areas": { get: "rates.clinical" },
  "/:organisation/rates/teams": { get: "rates.clinical" },
  "/:organisation/rates/comparisons": { get: "rates.clinical" },
  "/:organisation/rates/trends": { get: "rates.clinical" },
  "/:organisation/rates/recent-weeks": { get: "rates.clinical" },
  "/:organisation/rates/records": { get: "rates.clinical" },
  "/:organisation/rates/programme": { get: "rates.clinical", post: "rates.plan" },
  "/:organisation/rates/coverage": { get: "rates.clinical" },
  "/:organisation/rates/csv/:view/:table": { get: "rates.clinical" },
  "/:organisation/notices": { get: "notices.read" },
  "/:organisation/notices/:notice": { get: "notices.read", post: "notices.send" },
  "/:organisation/imports": { get: "imports" },
  "/:organisation/imports/new": { get: "imports", post: "imports" },
  "/:organisation/imports/templates/:kind": { get: "imports" },
  "/:organisation/imports/:import": { get: "imports", post: "imports" },
  "/:organisation/imports/:import/report.csv": { get: "imports" },
  "/:organisation/settings": { get: "settings.read", post: "settings.write" },
  "/:organisation/settings/people": { get: "people.read", post: "people.read" },
  "/:organisation/settings/seasons": { get: "settings.read", post: "settings.write" },
  "/:organisation/settings/teams": { get: "settings.read", post: "settings.write" },
  "/:organisation/settings/venues": { get: "settings.read", post: "settings.write" },
  "/api/:organisation/health": { get: "member" },
  "/api/:organisation/athletes": { get: "roster.read" },
  "/api/:organisation/sessions/sync": { post: "attendance.write" },
  "/api/:organisation/imports/:import/progress": { get: "imports" },
  "/api/:organisation/incidence": { get: "rates.clinical" },
};

/** The access of a pattern and method; undefined: nobody. */
export function accessOf(pattern: string, method: string): Access | undefined {
  const entry = routeAccess[`/${pattern.replace(/^\/|\/$/g, "")}`];
  return method === "GET" || method === "HEAD" ? entry?.get : entry?.post;
}
