import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { LinkButton } from "#src/components/ui/button.tsx";
import { ErrorView } from "#src/components/ui/states.tsx";

export function NotFound() {
  return (
    <>
      <DocumentTitle>Not found</DocumentTitle>
      <ErrorView
        heading="h1"
        title="Nothing is at this address"
        text="What was here was deleted, belongs to a team that you are not in, or never was. Check the address, or begin from the scenarios."
      >
        <LinkButton kind="go" to={paths.home()}>
          To the scenarios
        </LinkButton>
      </ErrorView>
    </>
  );
}
