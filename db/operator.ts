/**
 * The operator's command, for whoever runs the server. It alone makes an organisation and its first people:
 *
 *   npm run operator -- found --slug marram-bay --name "Marram Bay Athletic" --kind club \
 *     --time-zone Europe/London --phone "+44 1632 960100" \
 *     --admin "Edda Quarrie <edda@example.org>" --lead "Ines Calloway <ines@example.org>"
 *
 * Both get an invitation by mail as soon as the server runs. The lead needs no confirmation by another lead: the
 * operator vouches for the licence. Needs DATABASE_MAINTENANCE_URL and HALESIDE_MASTER_KEY.
 */
import { parseArgs } from "node:util";
import postgres from "postgres";
import { foundOrganisation, inviteFirstPerson } from "~/features/accounts/founding.server";

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    slug: { type: "string" },
    name: { type: "string" },
    kind: { type: "string", default: "club" },
    "time-zone": { type: "string" },
    phone: { type: "string" },
    "phone-hours": { type: "string" },
    admin: { type: "string" },
    lead: { type: "string" },
  },
});

function refuse(message: string): never {
  console.error(message);
  process.exit(1);
}

function required(name: "slug" | "name" | "time-zone" | "phone" | "admin" | "lead") {
  return values[name] ?? refuse(`--${name} is missing. See the top of db/operator.ts for an example.`);
}

/** "Name <address>" */
function parsePerson(text: string) {
  const match = /^\s*(.+?)\s*<([^<>\s]+@[^<>\s]+)>\s*$/.exec(text);
  const [, name, email] = match ?? [];
  return name && email ? { name, email } : refuse(`"${text}" must be written as: Name <address@example.org>`);
}

if (positionals[0] !== "found")
  refuse('The one command is "found". See the top of db/operator.ts for an example.');
const maintenanceUrl = process.env.DATABASE_MAINTENANCE_URL ?? refuse("DATABASE_MAINTENANCE_URL is missing.");
const masterKey = process.env.HALESIDE_MASTER_KEY ?? refuse("HALESIDE_MASTER_KEY is missing.");
const kind =
  values.kind === "school" ? "school" : values.kind === "club" ? "club" : refuse("--kind is club or school.");
const maintenance = postgres(maintenanceUrl, { max: 1, onnotice: () => {} });
try {
  const admin = parsePerson(required("admin"));
  const lead = parsePerson(required("lead"));
  const founding = {
    slug: required("slug"),
    name: required("name"),
    kind,
    timeZone: required("time-zone"),
    phone: required("phone"),
    ...(values["phone-hours"] ? { phoneHours: values["phone-hours"] } : {}),
  } as const;
  await maintenance.begin(async (sql) => {
    const organisationId = await foundOrganisation(sql, Buffer.from(masterKey, "base64"), founding);
    await inviteFirstPerson(sql, organisationId, { ...admin, roles: ["admin"] });
    await inviteFirstPerson(sql, organisationId, { ...lead, roles: ["lead"] });
  });
  console.log(
    `${required("name")} is founded. Invitations to ${admin.email} and ${lead.email} go out with the server.`,
  );
} catch (error) {
  refuse(error instanceof Error ? error.message : String(error));
} finally {
  await maintenance.end();
}
