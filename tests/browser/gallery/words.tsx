import {
  Button,
  ButtonLink,
  ConfirmButton,
  DescriptionList,
  Disclosure,
  EmptyState,
  Note,
  Page,
  PageHeading,
  SpotMark,
  StrokeTally,
  TextLink,
} from "~/ui";

/** Buttons, marks and notes. */
export function Words() {
  return (
    <Page>
      <PageHeading
        above="Tuesday 1 December, 17:30"
        below="A pitch by the sea; the surface is artificial turf."
        actions={
          <ButtonLink to="/new" look="primary">
            Add a session
          </ButtonLink>
        }
      >
        Training, artificial turf
      </PageHeading>
      <div className="flex flex-wrap items-start gap-3">
        <Button look="primary">Save</Button>
        <Button>Not done today</Button>
        <Button look="quiet">Leave it</Button>
        <Button look="danger">End membership</Button>
        <Button look="primary" size="large" busy>
          All blocks, everyone
        </Button>
        <ConfirmButton
          label="Delete draft"
          question="The draft goes for good. The session stays."
          confirmLabel="Delete the draft"
        />
      </div>
      <div className="my-6 flex flex-wrap items-center gap-8">
        <StrokeTally size="large" done={[true, true, true, false, false]} />
        <StrokeTally size="large" done={[true, true, true, true, true]} />
        <span className="flex flex-wrap gap-4">
          {Object.entries({ a: 5, b: 4, c: 2, d: 0, e: 5, f: 3 }).map(([week, count]) => (
            <StrokeTally key={week} done={[0, 1, 2, 3, 4].map((n) => n < count)} />
          ))}
        </span>
      </div>
      <ul className="space-y-3">
        <li>
          <SpotMark spot="filled">Full</SpotMark>
        </li>
        <li>
          <SpotMark spot="half" detail="Straight running only. As of 15:10">
            Modified
          </SpotMark>
        </li>
        <li>
          <SpotMark spot="crossed" detail="As of 15:10">
            Unavailable
          </SpotMark>
        </li>
        <li>
          <SpotMark spot="ring">Suspected</SpotMark>
        </li>
      </ul>
      <Note kind="serious" title="Treat as a serious knee injury">
        Out for today. No weight on the leg. Immobilise, compress and cool. A physician should see them as
        soon as possible.
      </Note>
      <Note kind="attention" title="Recorded exposure is low">
        Fewer than half of the sessions have it.
      </Note>
      <Note kind="settled">All is saved.</Note>
      <Note title="Who sees this">Clinical roles only.</Note>
      <EmptyState
        title="Sessions belong here"
        actions={
          <>
            <ButtonLink to="/n" look="primary">
              Add a session
            </ButtonLink>
            <TextLink to="/s">A sample file</TextLink>
          </>
        }
      >
        <p>
          A rate needs to know how often athletes trained and played. Add sessions one by one or bring a file.
        </p>
      </EmptyState>
      <DescriptionList
        items={[
          { term: "Body area", detail: "Knee, left" },
          { term: "Onset", detail: "27 Mar 2014, in training" },
        ]}
      />
      <Disclosure summary="How this is computed">
        <p>Exact limits for a rate.</p>
      </Disclosure>
    </Page>
  );
}
