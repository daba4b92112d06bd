import { Link } from 'react-router-dom';
import { paths } from '../../lib/paths';
import { ThemeWords } from './masthead';

export function Footer({ note }: { note?: string }) {
  return (
    <footer className="foot">
      <div className="wrap">
        <span>Hadamark, a registry of validated inverse methods{note ? `. ${note}` : ''}</span>
        <span className="foot-links">
          <Link to={paths.groups()}>Groups</Link>
          <Link to={paths.verification()}>Verification</Link>
          <Link to={paths.apiReference()}>API</Link>
          <ThemeWords />
        </span>
      </div>
      <div className="wrap">
        <p className="sm">Results are about methods, not about patients or plant: not for diagnosis, not a safety case.</p>
      </div>
    </footer>
  );
}
