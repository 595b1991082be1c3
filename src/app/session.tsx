/** Who is signed in, and the team whose pages are shown. */
import { createContext, use } from "react";
import { type Action, may, type Role } from "#shared/api/permissions.ts";
import type { Membership, SessionResponse } from "#shared/api/session.ts";

export interface Session {
  user: NonNullable<SessionResponse["user"]>;
  memberships: Membership[];
}

export interface Team {
  id: string;
  name: string;
  roles: Role[];
  /** Without a condition; what holds only for own exercise attempts counts as no. */
  may: (action: Action) => boolean;
}

export const SessionContext = createContext<Session | null>(null);
export const TeamContext = createContext<Team | null>(null);

export function useSession(): Session {
  const session = use(SessionContext);
  if (!session) throw new Error("useSession: this component stands outside the pages of a signed-in person.");
  return session;
}

/** The team of the address; only inside /teams/:teamId. */
export function useTeam(): Team {
  const team = use(TeamContext);
  if (!team) throw new Error("useTeam: this component stands outside the pages of a team.");
  return team;
}

export const teamOf = ({ team, roles }: Membership): Team => ({ ...team, roles, may: (action) => may(roles, action) });

const KEY = "holdfast.team";

/** The team that was looked at last, or the first one. */
export function homeTeam(memberships: readonly Membership[]): Team | null {
  let last: string | null = null;
  try {
    last = localStorage.getItem(KEY);
  } catch {
    // Storage is switched off: the first team it is.
  }
  const membership = memberships.find(({ team }) => team.id === last) ?? memberships[0];
  return membership ? teamOf(membership) : null;
}

export function rememberTeam(teamId: string) {
  try {
    localStorage.setItem(KEY, teamId);
  } catch {
    // As above.
  }
}
