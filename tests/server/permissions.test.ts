import { describe, expect, it } from "vitest";
import { ACTIONS, type Action, may, ROLES, type Role, rolesThatMay } from "#shared/api/permissions.ts";

/** The product's role matrix, written out once more by hand: T E R A. */
const TABLE: Record<Action, string> = {
  "open-scenarios": "yes yes yes yes",
  "open-logs": "yes yes yes yes",
  "read-members": "yes yes yes yes",
  "attempt-exercises": "yes yes yes yes",
  "edit-scenarios": "no yes yes yes",
  "make-runs": "no yes yes yes",
  "edit-campaigns": "no yes yes yes",
  "edit-logs": "no yes yes yes",
  "ask-for-review": "no yes yes yes",
  "decide-review": "no no yes no",
  "set-exercises": "no yes yes yes",
  "invite-members": "no no no yes",
  "change-roles": "no no no yes",
  "read-activity": "no no no yes",
};

describe("the role matrix", () => {
  const cells = ACTIONS.flatMap((action) => ROLES.map((role, i) => [role, action, TABLE[action].split(" ")[i]] as const));
  it.each(cells)("lets %s %s: %s", (role, action, expected) => {
    expect(may([role], action, { ownRevision: false })).toBe(expected === "yes");
  });

  it("lets a trainee keep what belongs to an exercise attempt of their own, and nothing else", () => {
    expect(may(["trainee"], "edit-scenarios", { ownAttempt: true })).toBe(true);
    expect(may(["trainee"], "make-runs", { ownAttempt: true })).toBe(true);
    expect(may(["trainee"], "edit-scenarios", { ownAttempt: false })).toBe(false);
    expect(may(["trainee"], "set-exercises", { ownAttempt: true })).toBe(false);
  });

  it("never lets a reviewer decide a review of a revision that they wrote, whatever other roles they hold", () => {
    const everything = [...ROLES];
    expect(may(everything, "decide-review", { ownRevision: true })).toBe(false);
    expect(may(everything, "decide-review")).toBe(false);
    expect(may(everything, "decide-review", { ownRevision: false })).toBe(true);
  });

  it("adds up the rights of several roles", () => {
    const both: Role[] = ["trainee", "reviewer"];
    expect(may(both, "edit-scenarios")).toBe(true);
    expect(may(["reviewer", "administrator"], "read-activity")).toBe(true);
    expect(may(["engineer", "reviewer"], "read-activity")).toBe(false);
  });

  it("gives nothing to somebody without a role", () => {
    for (const action of ACTIONS) expect(may([], action, { ownAttempt: true, ownRevision: false })).toBe(false);
  });

  it("names the roles to ask", () => {
    expect(rolesThatMay("edit-scenarios")).toEqual(["engineer", "reviewer", "administrator"]);
    expect(rolesThatMay("decide-review")).toEqual(["reviewer"]);
  });
});
