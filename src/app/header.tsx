import { Link, useLocation, useNavigate } from "react-router-dom";
import { IconButton } from "#src/components/ui/button.tsx";
import { Icon, Logo } from "#src/components/ui/icon.tsx";
import { Menu, MenuChoices, MenuItem, MenuLabel, MenuRule } from "#src/components/ui/menu.tsx";
import { listed } from "#src/lib/format.ts";
import { paths } from "./paths.ts";
import { type Session, type Team, useSession } from "./session.tsx";
import { setTheme, THEMES, turnTheme, useTheme } from "./theme.ts";
import { useLeave } from "./use-leave.ts";

const THEME_WORDS = { system: "As the system has it", light: "Light", dark: "Dark" };

const initials = (name: string): string =>
  name
    .split(/[\s.]+/)
    .filter(Boolean)
    .map((part) => part[0]?.toUpperCase())
    .filter((_, i, all) => i === 0 || i === all.length - 1)
    .join("");

interface MainPage {
  to: string;
  word: string;
  also?: string;
}

const pagesOf = (team: Team | null): MainPage[] => [
  ...(team
    ? [
        // Runs are pages of a scenario, with addresses of their own.
        { to: paths.scenarios(team.id), word: "Scenarios", also: paths.run(team.id, "") },
        { to: paths.logs(team.id), word: "Reception logs" },
        { to: paths.members(team.id), word: "Team" },
      ]
    : []),
  { to: paths.methods(), word: "Methods" },
];

const isCurrent = ({ to, also }: MainPage, pathname: string) =>
  pathname === to || pathname.startsWith(`${to}/`) || (also !== undefined && pathname.startsWith(also));

function TeamChoices({ session, team }: { session: Session; team: Team | null }) {
  const navigate = useNavigate();
  if (session.memberships.length < 2) return null;
  return (
    <MenuChoices
      options={session.memberships.map((membership) => ({ value: membership.team.id, word: membership.team.name }))}
      value={team?.id ?? ""}
      onChoose={(teamId) => navigate(paths.scenarios(teamId))}
    />
  );
}

/** Who one is, where one belongs, and the way out. */
function AccountEntries({ session, team }: { session: Session; team: Team | null }) {
  const theme = useTheme();
  const leave = useLeave();
  return (
    <>
      <MenuLabel>
        <b className="strong text-ink">{session.user.name}</b>
        <br />
        {session.user.email}
        {team && (
          <>
            <br />
            {listed(team.roles)} in {team.name}
          </>
        )}
      </MenuLabel>
      <MenuRule />
      <MenuItem asChild>
        <Link to={paths.account()}>Account</Link>
      </MenuItem>
      <MenuRule />
      <MenuLabel>Light and dark</MenuLabel>
      <MenuChoices options={THEMES.map((value) => ({ value, word: THEME_WORDS[value] }))} value={theme} onChoose={setTheme} />
      <MenuRule />
      <MenuItem onSelect={leave}>Sign out</MenuItem>
    </>
  );
}

export function Header({ team }: { team: Team | null }) {
  const session = useSession();
  const pages = pagesOf(team);
  const { pathname } = useLocation();
  return (
    <div className="topwrap noprint">
      <header className="top">
        <Link className="brand" to={paths.home()}>
          <Logo />
          Holdfast
        </Link>
        <nav className="nav max-md:hidden" aria-label="Holdfast">
          {pages.map((page) => (
            <Link key={page.to} to={page.to} aria-current={isCurrent(page, pathname) ? "page" : undefined}>
              {page.word}
            </Link>
          ))}
        </nav>
        <div className="who">
          {session.memberships.length > 1 ? (
            <Menu
              trigger={
                <button type="button" className="team max-md:hidden" aria-label={`Team: ${team?.name ?? "none"}. Choose another.`}>
                  <span>{team?.name}</span>
                  <Icon name="down" size={12} />
                </button>
              }
            >
              <MenuLabel>Team</MenuLabel>
              <TeamChoices session={session} team={team} />
            </Menu>
          ) : (
            <span className="team max-md:hidden">
              <span>{team?.name}</span>
            </span>
          )}
          <IconButton kind="bare" icon="theme" label="Turn light and dark" title="Light and dark" onClick={turnTheme} />
          <Menu
            trigger={
              <button type="button" className="initials max-md:hidden" aria-label={`${initials(session.user.name)}: account of ${session.user.name}`}>
                {initials(session.user.name)}
              </button>
            }
          >
            <AccountEntries session={session} team={team} />
          </Menu>
          <div className="md:hidden">
            <Menu trigger={<IconButton kind="bare" icon="menu" iconSize={18} label="Menu" />}>
              {pages.map((page) => (
                <MenuItem key={page.to} asChild>
                  <Link to={page.to} aria-current={isCurrent(page, pathname) ? "page" : undefined}>
                    {page.word}
                  </Link>
                </MenuItem>
              ))}
              <MenuRule />
              {session.memberships.length > 1 && <MenuLabel>Team</MenuLabel>}
              <TeamChoices session={session} team={team} />
              {session.memberships.length > 1 && <MenuRule />}
              <AccountEntries session={session} team={team} />
            </Menu>
          </div>
        </div>
      </header>
    </div>
  );
}
