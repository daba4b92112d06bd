import { useState, type ReactNode } from 'react';
import { Link, NavLink, useLocation } from 'react-router-dom';
import { paths } from '../../lib/paths';
import { setThemeChoice, themeChoices, useTheme, useThemeChoice } from '../../lib/theme';
import { IconButton } from '../ui/button';

export interface MastheadProps {
  /** Null for a visitor. */
  handle: string | null;
  /** What waits for this reviewer; null hides the count. */
  reviewCount: number | null;
  maySubmitSolver: boolean;
  mayCreatePhantom: boolean;
  mayAdminister: boolean;
  /** The search box; drawn twice, in the bar and in the phone menu. */
  search: (id: string) => ReactNode;
}

const links = [
  { to: paths.home(), name: 'Find a method' },
  { to: paths.benches(), name: 'Benches' },
  { to: paths.phantoms(), name: 'Phantoms' },
  { to: paths.solvers(), name: 'Solvers' },
  { to: paths.review(), name: 'Reviews' },
  { to: paths.reference(), name: 'Reference' },
] as const;

const isUnder = (to: string, pathname: string): boolean => pathname === to || (to !== '/' && pathname.startsWith(`${to}/`));
/** The checks and the interface are part of the reference, at addresses of their own. */
const isHere = (to: string, pathname: string): boolean => (to === paths.reference() ? [to, paths.verification(), paths.apiReference()] : [to]).some((p) => isUnder(p, pathname));

export function Masthead(props: MastheadProps) {
  const { handle, reviewCount, search } = props;
  const location = useLocation();
  // The menu belongs to the page it was opened on: going elsewhere closes it.
  const [openOn, setOpenOn] = useState<string | null>(null);
  const open = openOn === location.pathname;
  const setOpen = (next: boolean) => setOpenOn(next ? location.pathname : null);
  const noise = new URLSearchParams(location.search).get('noise');
  const keep = (to: string): string => (noise ? `${to}?noise=${encodeURIComponent(noise)}` : to);
  const nav = links.map((l) => (
    <Link key={l.to} to={keep(l.to)} aria-current={isHere(l.to, location.pathname) ? 'page' : undefined}>
      {l.name}
      {l.name === 'Reviews' && reviewCount ? <span className="ct"><span className="vh">, waiting: </span>{reviewCount}</span> : null}
    </Link>
  ));
  const account = handle === null
    ? <Link className="who" to={paths.signIn(location.pathname + location.search)}>Sign in</Link>
    : <Link className="who" to={paths.account()}>{handle}</Link>;
  return (
    <header className="mast">
      <a className="skip" href="#main">Skip to the content</a>
      <div className="wrap">
        <Link className="logo" to={keep(paths.home())}>
          <svg width="27" height="27" viewBox="0 0 28 28" aria-hidden="true">
            <path d="M5 3V25M23 3V25" stroke="var(--ink)" strokeWidth="2.6" />
            <path d="M5 19C12 19 14.5 9 23 9" fill="none" stroke="var(--petrol)" strokeWidth="2.6" />
          </svg>
          <span>Hadamark</span>
        </Link>
        <nav aria-label="Main">{nav}</nav>
        {search('find-bar')}
        {props.maySubmitSolver ? <Link className="btn pri" to={paths.solverNew()}>Submit a solver</Link> : null}
        <ThemeSwitch />
        {account}
        <button type="button" className="ib menu" aria-label={open ? 'Close menu' : 'Open menu'} aria-expanded={open} aria-controls="phone-menu" onClick={() => setOpen(!open)}>
          <svg width="18" height="14" viewBox="0 0 18 14" stroke="currentColor" strokeWidth="1.6" aria-hidden="true"><path d="M1 2H17M1 7H17M1 12H17" /></svg>
        </button>
      </div>
      <div className="mmenu" id="phone-menu" hidden={!open}>
        {open ? search('find-menu') : null}
        {nav}
        <NavLink to={paths.groups()}>Groups</NavLink>
        {props.maySubmitSolver ? <NavLink to={paths.solverNew()}>Submit a solver</NavLink> : null}
        {props.mayCreatePhantom ? <NavLink to={paths.phantomNew()}>New phantom</NavLink> : null}
        {props.mayAdminister ? <NavLink to={paths.admin()}>Administration</NavLink> : null}
        {handle === null ? <NavLink to={paths.signIn(location.pathname + location.search)}>Sign in</NavLink> : <NavLink to={paths.account()}>{handle}</NavLink>}
        <ThemeWords />
      </div>
    </header>
  );
}

/** One press goes to the other sheet; what the system asks for is the start. */
function ThemeSwitch() {
  const theme = useTheme();
  const other = theme === 'dark' ? 'light' : 'dark';
  return (
    <IconButton className="th" label={`Switch to the ${other} sheet`} onClick={() => setThemeChoice(other)}>
      <svg width="16" height="16" viewBox="-8 -8 16 16" aria-hidden="true">
        <circle r="5.6" fill="none" stroke="currentColor" strokeWidth="1.4" />
        <path d="M0-5.6A5.6 5.6 0 0 1 0 5.6Z" fill="currentColor" />
      </svg>
    </IconButton>
  );
}

/** Light, dark, or as the system: the third way back. */
export function ThemeWords() {
  const choice = useThemeChoice();
  const next = themeChoices[(themeChoices.indexOf(choice) + 1) % themeChoices.length] ?? 'system';
  const words = { system: 'as the system', light: 'light', dark: 'dark' } as const;
  return <button type="button" className="lnk" onClick={() => setThemeChoice(next)}>Sheet: {words[choice]}</button>;
}
