import type { Random } from "./random.ts";
import type { Language } from "./types.ts";

/**
 * Given names in common use; family names made up for the demo, so that no combination is a real person's.
 * Each household takes its names from one group and writes in one of the languages the demo's notices use.
 */
type NameGroup = {
  languages: readonly (readonly [Language, number])[];
  share: number;
  female: readonly string[];
  male: readonly string[];
  family: readonly string[];
};

const words = (list: string) => list.split(" ");
const ENGLISH_ONLY = [["en", 1]] as const;

const GROUPS: readonly NameGroup[] = [
  {
    languages: ENGLISH_ONLY,
    share: 34,
    female: words(
      "Amelia Isla Freya Poppy Martha Edith Rosie Thea Harriet Nell Imogen Beatrix Orla Tess Flora",
    ),
    male: words(
      "Alfie Rowan Toby Jasper Wilfred Hugo Ellis Frank Reuben Barnaby Callum Dexter Jude Otto Miles",
    ),
    family: words(
      "Saltmere Tidewell Marrowby Fennacre Gullsworth Dunelock Reedhaven Shinglefoot Brackenmoor Wrackford Sandlecombe Otterby Creekwain Harrowtide Pebblesham Lanternby Windlecroft Sloebridge Kelpworth Foamleigh",
    ),
  },
  {
    languages: [
      ["en", 4],
      ["cy", 6],
    ],
    share: 10,
    female: words("Cerys Ffion Nia Eleri Mali Seren Lowri Heledd"),
    male: words("Gethin Iolo Macsen Osian Emrys Cai Deiniol Ifan"),
    family: words("Penllwynor Traethog Morfarwel Glanhesg Tywodlan Carregwylan Brynheli Aberwennol"),
  },
  {
    languages: [
      ["en", 4],
      ["pl", 6],
    ],
    share: 11,
    female: words("Zuzanna Kinga Oliwia Jagoda Hanna Lena Maja Nadia"),
    male: words("Kacper Szymon Igor Oskar Wiktor Bartek Tymon Leon"),
    family: words("Wydmiarz Mewczak Trzcinkos Bursztynik Falowiak Piaskorz Latarnek Sosnowierz"),
  },
  {
    languages: [
      ["en", 4],
      ["es", 6],
    ],
    share: 10,
    female: words("Lucía Inés Candela Noa Martina Ximena Paloma Vera"),
    male: words("Mateo Bruno Iker Gael Adrián Nicolás Teo Hugo"),
    family: words("Ribasanta Dunamar Olmareda Gaviotero Arenisca Farolesca Juncalera Mareasol"),
  },
  {
    languages: ENGLISH_ONLY,
    share: 12,
    female: words("Anaya Meera Zara Ishani Kavya Safiya Aisha Tara"),
    male: words("Arjun Rohan Zayn Kabir Ishaan Hamza Imran Dev"),
    family: words("Samudrani Lehrapuri Kinarwal Sagarvati Motilani Nadirzai Rewakhil Chandrabel"),
  },
  {
    languages: ENGLISH_ONLY,
    share: 10,
    female: words("Adaeze Ama Folake Zuri Nyasha Efua Temi Sade"),
    male: words("Kofi Tunde Chidi Kwame Tafara Obi Jomo Dayo"),
    family: words("Okunwave Adunshore Mbelari Tidawale Nyandelore Asantebay Chizorelle Olumarsh"),
  },
  {
    languages: ENGLISH_ONLY,
    share: 7,
    female: words("Mei Yuna Linh Hana Jia Sora"),
    male: words("Jun Minh Kai Ren Haruto Wei"),
    family: words("Hailang Shiosawa Bienxanh Padohan Liutingfell Isonami"),
  },
  {
    languages: ENGLISH_ONLY,
    share: 6,
    female: words("Layla Dina Samira Yasmin Rima Elif"),
    male: words("Karim Sami Yusuf Emre Nabil Idris"),
    family: words("Bahrawi Mawjari Sahilani Denizgul Ramlani Manarat"),
  },
];

export type Household = { group: NameGroup; familyName: string; language: Language };

/** Draws a household: one name group, one family name, one language. */
export function drawHousehold(random: Random): Household {
  const group = random.weighted(GROUPS.map((each) => [each, each.share] as const));
  return { group, familyName: random.pick(group.family), language: random.weighted(group.languages) };
}

/** A given name of the household's group; `sounds` decides the list and says nothing of anyone's sex. */
export function drawGivenName(random: Random, household: Household, sounds: "female" | "male"): string {
  return random.pick(household.group[sounds]);
}

/** Hands out addresses at example.org, numbering namesakes, and phone numbers of Ofcom's 01632 960 range. */
export function createContactBook(random: Random) {
  const taken = new Set<string>();
  const lines = random.shuffle(Array.from({ length: 1000 }, (_, line) => String(line).padStart(3, "0")));
  let nextLine = 0;
  return {
    email(givenName: string, familyName: string): string {
      const plain = `${givenName}.${familyName}`
        .normalize("NFD")
        .replace(/[^a-zA-Z.-]/g, "")
        .toLowerCase();
      let local = plain;
      for (let count = 2; taken.has(local); count += 1) local = `${plain}${count}`;
      taken.add(local);
      return `${local}@example.org`;
    },
    /** The range holds a thousand numbers; after the last they repeat. */
    phone(): string {
      const line = lines[nextLine % lines.length];
      nextLine += 1;
      return `+44 1632 960${line}`;
    },
  };
}
export type ContactBook = ReturnType<typeof createContactBook>;
