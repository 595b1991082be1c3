/** Who may do what: the role matrix of the product as data. Server and page ask the same function. */
import { z } from "zod";

export const ROLES = ["trainee", "engineer", "reviewer", "administrator"] as const;
export const roleSchema = z.enum(ROLES);
export type Role = (typeof ROLES)[number];

/** "own-attempts": only what belongs to an exercise attempt of their own. "not-own-revision": never of a revision that they wrote. */
type Right = "yes" | "no" | "own-attempts" | "not-own-revision";

interface Rule extends Record<Role, Right> {
  /** Completes "You may not ..." and "An engineer may ...". */
  text: string;
}

const everybody = { trainee: "yes", engineer: "yes", reviewer: "yes", administrator: "yes" } as const;
const makers = { trainee: "own-attempts", engineer: "yes", reviewer: "yes", administrator: "yes" } as const;
const staff = { trainee: "no", engineer: "yes", reviewer: "yes", administrator: "yes" } as const;
const administrators = { trainee: "no", engineer: "no", reviewer: "no", administrator: "yes" } as const;

const MATRIX = {
  "open-scenarios": { text: "open scenarios and runs of the team", ...everybody },
  "open-logs": { text: "open reception logs of the team", ...everybody },
  "read-members": { text: "see who belongs to the team", ...everybody },
  "attempt-exercises": { text: "attempt exercises", ...everybody },
  "edit-scenarios": { text: "create and edit scenarios", ...makers },
  "make-runs": { text: "keep runs", ...makers },
  "edit-campaigns": { text: "create and edit campaigns", ...makers },
  "edit-logs": { text: "upload and edit reception logs", ...makers },
  "ask-for-review": { text: "ask for a review", ...staff },
  "decide-review": { text: "decide a review", trainee: "no", engineer: "no", reviewer: "not-own-revision", administrator: "no" },
  "set-exercises": { text: "set exercises", ...staff },
  "invite-members": { text: "invite members", ...administrators },
  "change-roles": { text: "change roles", ...administrators },
  "read-activity": { text: "read the activity record", ...administrators },
} as const satisfies Record<string, Rule>;

export type Action = keyof typeof MATRIX;
export const ACTIONS = Object.keys(MATRIX) as Action[];

/** What the conditional rights depend on; what is not stated counts as not fulfilled. */
export interface Circumstances {
  /** The thing belongs to an exercise attempt of the person. */
  ownAttempt?: boolean;
  /** The person wrote the revision under review. */
  ownRevision?: boolean;
}

/** A person has a set of roles in a team; rights add up. */
export function may(roles: readonly Role[], action: Action, about: Circumstances = {}): boolean {
  return roles.some((role) => {
    const right: Right = MATRIX[action][role];
    return (
      right === "yes" || (right === "own-attempts" && about.ownAttempt === true) || (right === "not-own-revision" && about.ownRevision === false)
    );
  });
}

export const actionText = (action: Action): string => MATRIX[action].text;

/** Roles that may do it without any condition, for "Ask an engineer, a reviewer or an administrator". */
export const rolesThatMay = (action: Action): Role[] =>
  ROLES.filter((role) => MATRIX[action][role] === "yes" || MATRIX[action][role] === "not-own-revision");
