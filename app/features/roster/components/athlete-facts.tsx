import { languageWords, relationWords, sentenceCase, sexWords } from "~/features/vocabulary";
import { formatDay } from "~/platform/days";
import { ageOn } from "~/statistics";
import { DescriptionList, Region, TextLink } from "~/ui";
import type { Sex } from "~db/schema/codes";

type Props = {
  athlete: { number: string | null; dateOfBirth: string | null; sex: string; dominantLeg: string };
  guardians: {
    id: string;
    name: string;
    relation: string;
    phone: string | null;
    email: string | null;
    language: string;
    mayBeTold: boolean;
    limited: boolean;
  }[];
  exposure: { exposures: number; hours: number } | null;
  season: { name: string } | null;
  here: string;
  today: string;
};

/** Profile, exposure and family, for the roles that keep contacts. */
export function AthleteFacts({ athlete, guardians, exposure, season, here, today }: Props) {
  const { dateOfBirth } = athlete;
  return (
    <>
      <Region heading="Profile">
        <DescriptionList
          items={[
            { term: "Number", detail: athlete.number ?? "none" },
            {
              term: "Born",
              detail: dateOfBirth
                ? `${formatDay(dateOfBirth, "long")}, ${ageOn(dateOfBirth, today)} years today`
                : "not known: add it, or this athlete counts in no age band",
            },
            { term: "Sex", detail: sexWords[athlete.sex as Sex] },
            {
              term: "Dominant leg",
              detail: athlete.dominantLeg === "unknown" ? "not known" : athlete.dominantLeg,
            },
            {
              term: season ? `Exposure, ${season.name}` : "Exposure",
              detail: exposure
                ? `${exposure.exposures} athlete-exposures, ${exposure.hours.toFixed(1)} hours`
                : "no season yet",
            },
          ]}
        />
      </Region>
      <Region heading="Guardians">
        {guardians.length === 0 ? (
          <p className="max-w-prose text-soft">
            No guardian is recorded: in an emergency nobody at home could be told. Add one now.
          </p>
        ) : (
          <DescriptionList
            items={guardians.map((guardian, index) => ({
              key: guardian.id,
              term: `${index + 1}. ${guardian.name}, ${relationWords[guardian.relation] ?? guardian.relation}`,
              detail: (
                <>
                  {guardian.phone ? (
                    <a
                      href={`tel:${guardian.phone.replace(/[^\d+]/g, "")}`}
                      className="text-lagoon underline"
                    >
                      {guardian.phone}
                    </a>
                  ) : (
                    "no phone"
                  )}
                  {guardian.email ? (
                    <span className="block break-words text-soft">{guardian.email}</span>
                  ) : null}
                  <span className="block text-soft">
                    {sentenceCase(languageWords[guardian.language] ?? guardian.language)}
                    {guardian.mayBeTold ? "" : ", may not be told"}
                    {guardian.limited ? ", legal limits on file" : ""}
                  </span>
                </>
              ),
            }))}
          />
        )}
        <p className="mt-3">
          <TextLink to={`${here}/guardians`}>
            {guardians.length === 0 ? "Add a guardian" : "Change guardians"}
          </TextLink>
        </p>
      </Region>
    </>
  );
}
