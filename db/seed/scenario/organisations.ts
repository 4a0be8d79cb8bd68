import type { ContactBook } from "./names.ts";
import { dayInSeason, listSportRules, MARRAM_BAY, OTTERWICK, TEAM_PLANS } from "./plan.ts";
import type { Membership, Organisation, Person, Role, Team, Venue } from "./types.ts";

export function listOrganisations(): Organisation[] {
  return [
    {
      key: MARRAM_BAY,
      name: "Marram Bay Athletic",
      kind: "club",
      timeZone: "Europe/London",
      sports: listSportRules(MARRAM_BAY),
    },
    {
      key: OTTERWICK,
      name: "Otterwick Secondary School",
      kind: "school",
      timeZone: "Europe/London",
      sports: listSportRules(OTTERWICK),
    },
  ];
}

export function listTeams(years: readonly [number, number, number]): Team[] {
  return TEAM_PLANS.map((plan) => ({
    organisation: plan.organisation,
    key: plan.key,
    name: plan.name,
    sport: plan.sport,
    sexCategory: plan.sexCategory,
    ageGroup: plan.ageGroup,
    programmeFrom: dayInSeason(years[plan.programmeStart.season] ?? years[2], plan.programmeStart.monthDay),
    weeklyTarget: plan.strengthEveryWeeks === null ? 1 : 2,
  }));
}

type VenueRow = readonly [
  organisation: string,
  key: string,
  name: string,
  address: string,
  access: string,
  defibrillator: string,
];

const VENUE_ROWS: readonly VenueRow[] = [
  [
    MARRAM_BAY,
    "harbour-field",
    "Harbour Field",
    "Saltpan Road, Marram Bay",
    "Ambulance by the blue gate on Saltpan Road; the code is on the clubhouse board. Someone waits at the gate.",
    "Outside wall of the clubhouse, left of the door",
  ],
  [
    MARRAM_BAY,
    "dune-park",
    "Dune Park",
    "Lower Dune Lane, Marram Bay",
    "Ambulance through the car park to the barrier; the floodlight key opens it.",
    "Changing block, beside the drinking tap",
  ],
  [
    MARRAM_BAY,
    "lighthouse-hall",
    "Lighthouse Hall",
    "Beacon Street, Marram Bay",
    "Ambulance at the rear doors on Lamp Lane, level access to the floor.",
    "Entrance hall, under the clock",
  ],
  [
    MARRAM_BAY,
    "breakwater-hall",
    "Breakwater Hall",
    "Quay Walk, Marram Bay",
    "Ambulance on the quay side; keep the roller door clear.",
    "Reception desk",
  ],
  [
    MARRAM_BAY,
    "sluice-gym",
    "Sluice Lane Gym",
    "Sluice Lane, Marram Bay",
    "Ambulance to the front door; the lift takes a stretcher.",
    "First landing",
  ],
  [
    OTTERWICK,
    "otterwick-playing-field",
    "Otterwick playing field",
    "School Rise, Otterwick",
    "Ambulance by the service road behind the kitchens; the caretaker opens the bollard.",
    "PE office, outside wall",
  ],
  [
    OTTERWICK,
    "otterwick-gym",
    "Otterwick gym",
    "School Rise, Otterwick",
    "Ambulance at the main entrance, then the corridor on the right.",
    "PE office, outside wall",
  ],
];

export function listVenues(contacts: ContactBook): Venue[] {
  return VENUE_ROWS.map(([organisation, key, name, address, access, defibrillator]) => ({
    organisation,
    key,
    name,
    emergencyCard: {
      address,
      access,
      defibrillator,
      emergencyNumber: "999",
      sitePhone: contacts.phone(),
      nearestEmergencyDepartment: "Marram Bay General, Infirmary Road, 12 minutes by car",
    },
  }));
}

type StaffRow = readonly [
  organisation: string,
  givenName: string,
  familyName: string,
  role: Role,
  teams: "all" | readonly string[],
];

const STAFF_ROWS: readonly StaffRow[] = [
  [MARRAM_BAY, "Bronwen", "Lanternby", "admin", "all"],
  [MARRAM_BAY, "Ifeoma", "Quarrelune", "lead", "all"],
  [MARRAM_BAY, "Tomasz", "Latarnek", "trainer", "all"],
  [
    MARRAM_BAY,
    "Priya",
    "Samudrani",
    "trainer",
    [
      "basketball-girls-u16",
      "basketball-boys-u16",
      "basketball-boys-u18",
      "volleyball-mixed-u14",
      "volleyball-girls-u18",
    ],
  ],
  [MARRAM_BAY, "Carys", "Morfarwel", "coach", ["soccer-girls-u16", "soccer-girls-u14"]],
  [MARRAM_BAY, "Denzil", "Wrackford", "coach", ["soccer-men"]],
  [MARRAM_BAY, "Pilar", "Dunamar", "coach", ["soccer-women"]],
  [MARRAM_BAY, "Owain", "Glanhesg", "coach", ["soccer-boys-u14", "soccer-boys-u16"]],
  [MARRAM_BAY, "Maud", "Pebblesham", "coach", ["soccer-girls-u12", "soccer-boys-u12"]],
  [MARRAM_BAY, "Abena", "Asantebay", "coach", ["basketball-girls-u16"]],
  [MARRAM_BAY, "Lewin", "Harrowtide", "coach", ["basketball-boys-u16", "basketball-boys-u18"]],
  [MARRAM_BAY, "Signe", "Creekwain", "coach", ["handball-girls-u16", "handball-women"]],
  [MARRAM_BAY, "Marek", "Falowiak", "coach", ["handball-boys-u18"]],
  [MARRAM_BAY, "Yasuko", "Isonami", "coach", ["volleyball-mixed-u14", "volleyball-girls-u18"]],
  [OTTERWICK, "Gwilym", "Carregwylan", "admin", "all"],
  [OTTERWICK, "Nasreen", "Sahilani", "lead", "all"],
  [OTTERWICK, "Hetty", "Sloebridge", "trainer", "all"],
  [OTTERWICK, "Andoni", "Gaviotero", "trainer", ["otterwick-soccer-girls-u16"]],
  // The same two people coach at the club: one person may work for several organisations.
  [OTTERWICK, "Carys", "Morfarwel", "coach", ["otterwick-soccer-girls-u16"]],
  [OTTERWICK, "Yasuko", "Isonami", "coach", ["otterwick-volleyball-mixed-u14"]],
  [OTTERWICK, "Rafe", "Kelpworth", "coach", ["otterwick-basketball-boys-u16"]],
];

/** Everyone who signs in. A person who works for both organisations is one person with two memberships. */
export function listStaff(contacts: ContactBook): { people: Person[]; memberships: Membership[] } {
  const people = new Map<string, Person>();
  const memberships = STAFF_ROWS.map(([organisation, givenName, familyName, role, teams]): Membership => {
    const key = `${givenName}-${familyName}`.toLowerCase();
    if (!people.has(key)) {
      const email = contacts.email(givenName, familyName);
      people.set(key, { key, givenName, familyName, email, phone: contacts.phone() });
    }
    return { organisation, person: key, role, teams: teams === "all" ? "all" : [...teams] };
  });
  return { people: [...people.values()], memberships };
}

/** Who looks after a team: its coach, and the athletic trainer who covers all teams. */
export function staffOf(memberships: readonly Membership[], organisation: string, team: string) {
  const own = memberships.filter((each) => each.organisation === organisation);
  const coach = own.find(
    (each) => each.role === "coach" && each.teams !== "all" && each.teams.includes(team),
  );
  const trainer = own.find((each) => each.role === "trainer" && each.teams === "all");
  if (!coach || !trainer) throw new RangeError(`staffOf: ${team} needs a coach and an athletic trainer`);
  return { coach: coach.person, trainer: trainer.person };
}
