import { useEffect, useRef } from "react";
import { Outlet, ScrollRestoration, useLocation, useParams } from "react-router-dom";
import { Cautions } from "./cautions.tsx";
import { Header } from "./header.tsx";
import { homeTeam, teamOf, useSession } from "./session.tsx";

/** Another page: reading and keys begin at its content. Filters and pages of a list change only the search and move nothing. */
function useFocusOnNewPage() {
  const main = useRef<HTMLElement>(null);
  const { pathname } = useLocation();
  const before = useRef(pathname);
  useEffect(() => {
    if (before.current === pathname) return;
    before.current = pathname;
    main.current?.focus({ preventScroll: true });
  }, [pathname]);
  return main;
}

export function Layout() {
  const { memberships } = useSession();
  const { teamId } = useParams();
  const here = memberships.find(({ team }) => team.id === teamId);
  const main = useFocusOnNewPage();
  return (
    <div className="shell">
      <a className="skip" href="#main">
        Skip to the content
      </a>
      <Header team={here ? teamOf(here) : homeTeam(memberships)} />
      <main className="page" id="main" ref={main} tabIndex={-1}>
        <Outlet />
      </main>
      <footer className="foot">
        <Cautions />
      </footer>
      <ScrollRestoration />
    </div>
  );
}
