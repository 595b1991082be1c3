import { isRouteErrorResponse, useRouteError } from "react-router-dom";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { Button } from "#src/components/ui/button.tsx";
import { ErrorView } from "#src/components/ui/states.tsx";
import { NotFound } from "./not-found.tsx";

/** A part of the page that is fetched when it is first needed, and was not there: another version was installed, or no connection. */
const isMissingPart = (error: unknown) => error instanceof TypeError && /import|module/i.test(error.message);

/** Leaves by a full load: whatever is broken in memory is gone, drafts are in the browser's storage. */
export function Crashed() {
  const error = useRouteError();
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFound />;
  const missing = isMissingPart(error);
  return (
    <>
      <DocumentTitle>Stopped</DocumentTitle>
      <ErrorView
        heading="h1"
        title={missing ? "A part of this page could not be loaded" : "This page has stopped"}
        text={
          missing
            ? "Either Holdfast was updated in the meantime or the server cannot be reached. Load the page again."
            : "A mistake in the program stopped it. Unsaved changes of a scenario are kept in this browser and come back when the page is loaded again."
        }
      >
        <Button kind="go" onClick={() => location.reload()}>
          Load the page again
        </Button>
        <Button onClick={() => location.assign(paths.home())}>To the scenarios</Button>
      </ErrorView>
      {!missing && (
        <details className="mx-auto max-w-measure text-small text-ink-2">
          <summary>What to tell the developers</summary>
          <pre className="mt-2 overflow-x-auto border-t border-line pt-2 font-sans whitespace-pre-wrap">
            {error instanceof Error ? `${error.name}: ${error.message}` : String(error)}
          </pre>
        </details>
      )}
    </>
  );
}
