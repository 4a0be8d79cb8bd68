import { index, layout, type RouteConfig, route } from "@react-router/dev/routes";

/** Every address, grouped by area. Who may reach which: app/features/accounts/route-access.ts. */
export default [
  index("routes/home.ts"),
  route("health", "routes/health.ts"),
  route("webhooks/mail", "routes/webhooks/mail.ts"),

  layout("routes/accounts/layout.tsx", [
    route("sign-in", "routes/accounts/sign-in.tsx"),
    route("sign-out", "routes/accounts/sign-out.ts"),
    route("forgot-password", "routes/accounts/forgot-password.tsx"),
    route("reset-password", "routes/accounts/reset-password.tsx"),
    route("verify-email", "routes/accounts/verify-email.tsx"),
    route("organisations", "routes/accounts/organisations.tsx"),
    route("account", "routes/accounts/account.tsx"),
    route("invitations/:organisationId/:token", "routes/accounts/invitation.tsx"),
  ]),

  route("families/:organisationId/:token", "routes/families/notice.tsx"),

  route("api/:organisation/health", "routes/api/health.ts"),
  route("api/:organisation/athletes", "routes/api/athletes.ts"),
  route("api/:organisation/sessions/sync", "routes/api/sessions-sync.ts"),
  route("api/:organisation/imports/:import/progress", "routes/api/import-progress.ts"),
  route("api/:organisation/incidence", "routes/api/incidence.ts"),

  route(":organisation", "routes/organisation/layout.tsx", [
    index("routes/organisation/index.ts"),
    route("today", "routes/today/today.tsx"),
    route("today/day-list", "routes/today/day-list.tsx"),

    route("roster", "routes/roster/roster.tsx"),
    route("roster/new", "routes/roster/new.tsx"),
    route("roster/:athlete", "routes/roster/athlete.tsx"),
    route("roster/:athlete/edit", "routes/roster/edit.tsx"),
    route("roster/:athlete/guardians", "routes/roster/guardians.tsx"),
    route("roster/:athlete/availability", "routes/roster/availability.tsx"),

    route("sessions", "routes/sessions/sessions.tsx"),
    route("sessions/new", "routes/sessions/new.tsx"),
    route("sessions/:session", "routes/sessions/session.tsx"),
    route("sessions/:session/attendance", "routes/sessions/attendance.tsx"),
    route("sessions/:session/warm-up", "routes/sessions/warm-up.tsx"),

    route("injuries", "routes/injuries/injuries.tsx"),
    route("injuries/new", "routes/injuries/new.tsx"),
    route("injuries/draft", "routes/injuries/draft.ts"),
    route("injuries/export.csv", "routes/injuries/export.ts"),
    route("injuries/:injury", "routes/injuries/injury.tsx"),
    route("injuries/:injury/edit", "routes/injuries/edit.tsx"),
    route("injuries/:injury/notice", "routes/injuries/notice.tsx"),
    route("report-injury", "routes/injuries/report-injury.tsx"),
    route("coach-reports", "routes/injuries/coach-reports.tsx"),
    route("coach-reports/:report", "routes/injuries/coach-report.tsx"),
    route("encounters/new", "routes/injuries/new-encounter.tsx"),

    route("warm-ups", "routes/warm-ups/warm-ups.tsx"),

    route("rates", "routes/rates/rates.tsx"),
    route("rates.csv", "routes/rates/rates-csv.ts"),
    route("rates/severity", "routes/rates/severity.tsx"),
    route("rates/prevalence", "routes/rates/prevalence.tsx"),
    route("rates/body-areas", "routes/rates/body-areas.tsx"),
    route("rates/teams", "routes/rates/teams.tsx"),
    route("rates/comparisons", "routes/rates/comparisons.tsx"),
    route("rates/trends", "routes/rates/trends.tsx"),
    route("rates/recent-weeks", "routes/rates/recent-weeks.tsx"),
    route("rates/programme", "routes/rates/programme.tsx"),
    route("rates/coverage", "routes/rates/coverage.tsx"),
    route("rates/records", "routes/rates/records.tsx"),
    route("rates/csv/:view/:table", "routes/rates/view-csv.ts"),

    route("notices", "routes/notices/notices.tsx"),
    route("notices/:notice", "routes/notices/notice.tsx"),

    route("imports", "routes/imports/imports.tsx"),
    route("imports/new", "routes/imports/new.tsx"),
    route("imports/templates/:kind", "routes/imports/template.ts"),
    route("imports/:import", "routes/imports/import.tsx"),
    route("imports/:import/report.csv", "routes/imports/report.ts"),

    route("settings", "routes/settings/settings.tsx"),
    route("settings/people", "routes/settings/people.tsx"),
    route("settings/seasons", "routes/settings/seasons.tsx"),
    route("settings/teams", "routes/settings/teams.tsx"),
    route("settings/venues", "routes/settings/venues.tsx"),
  ]),
] satisfies RouteConfig;
