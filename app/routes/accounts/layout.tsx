import { Outlet } from "react-router";
import { Page, SkipLink, TopBar } from "~/ui";

/** The frame of pages outside an organisation: the bar alone. */
export default function AccountsLayout() {
  return (
    <>
      <SkipLink />
      <TopBar name="Haleside" home="/" />
      <Page width="form" bottomNav={false}>
        <Outlet />
      </Page>
    </>
  );
}
