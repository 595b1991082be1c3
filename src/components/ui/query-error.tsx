import type { ReactNode } from "react";
import { isApiError, isOutage } from "#src/api/client.ts";
import { instantText } from "#src/lib/format.ts";
import { Button } from "./button.tsx";
import { ErrorView } from "./states.tsx";

interface QueryErrorProps {
  error: unknown;
  /** Asks again. */
  onRetry: () => void;
  /** What was asked for: "The scenarios". */
  what: string;
  /** Another way on, beside trying again: a link back. */
  children?: ReactNode;
}

/** Why a view has no data, and a way on. */
export function QueryError({ error, onRetry, what, children }: QueryErrorProps) {
  const again = (
    <Button kind="go" onClick={onRetry}>
      Try again
    </Button>
  );
  if (isOutage(error)) {
    const database = error.code === "database-unavailable";
    return (
      <ErrorView
        title={database ? "The database does not answer" : "The server cannot be reached"}
        text={`${what} will be shown as soon as it can be reached again; it is tried every few seconds.`}
      >
        <Button onClick={onRetry}>Try now</Button>
        {children}
      </ErrorView>
    );
  }
  if (isApiError(error, "scenario-deleted") && error.details.deleted) {
    const { name, by, at } = error.details.deleted;
    return (
      <ErrorView title={`“${name}” was deleted`} text={`${by} deleted this scenario on ${instantText(at)}.`}>
        {children}
      </ErrorView>
    );
  }
  if (isApiError(error, "not-found")) {
    return (
      <ErrorView title="Nothing is at this address" text="It was deleted, or it belongs to a team that you are not in.">
        {children}
      </ErrorView>
    );
  }
  if (isApiError(error, "not-permitted")) {
    return (
      <ErrorView title="You may not see this" text={error.message}>
        {children}
      </ErrorView>
    );
  }
  if (isApiError(error, "signed-out")) {
    return (
      <ErrorView title="You are signed out" text="Sign in again to see this page; what you typed is still here.">
        <Button kind="go" onClick={onRetry}>
          Sign in again
        </Button>
      </ErrorView>
    );
  }
  if (isApiError(error, "not-understood")) {
    return (
      <ErrorView title="The server’s answer was not understood" text="This page is probably older than the server. Load it again.">
        <Button kind="go" onClick={() => location.reload()}>
          Load the page again
        </Button>
        {children}
      </ErrorView>
    );
  }
  return (
    <ErrorView title={`${what} cannot be shown`} text={isApiError(error) ? error.message : "Something went wrong in this page."}>
      {again}
      {children}
    </ErrorView>
  );
}

/** What to say of an action that failed, where it was asked for. */
export function failureText(error: unknown): string {
  if (isApiError(error)) return error.message;
  return "Something went wrong in this page; nothing was changed.";
}
