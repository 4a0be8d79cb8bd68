import { useParams } from "react-router";
import { ButtonLink, EmptyState, Page } from "~/ui";

/** In place of rates while the organisation has no season. */
export function NoSeason() {
  const { organisation } = useParams();
  return (
    <Page>
      <h1 className="sr-only">Rates</h1>
      <EmptyState
        title="Rates need a season"
        actions={<ButtonLink to={`/${organisation}/settings/seasons`}>Seasons</ButtonLink>}
      >
        <p>
          Injuries and exposure are counted over a season. Once your administrator has set one, and sessions
          are recorded or imported, this page shows how often athletes are injured, with what certainty.
        </p>
      </EmptyState>
    </Page>
  );
}
