import { useId, useRef, useState, type KeyboardEvent } from 'react';
import { Link, useNavigate } from 'react-router-dom';

export interface SearchItem {
  key: string;
  kind: string;
  name: string;
  line: string;
  path: string;
}

interface SearchBoxProps {
  id: string;
  text: string;
  onText: (text: string) => void;
  items: readonly SearchItem[];
  /** Shown instead of items: searching, nothing found, failed. */
  note?: string;
}

/** Combobox: type a name, an identifier or a hash; arrows choose, Enter opens, Escape closes. */
export function SearchBox({ id, text, onText, items, note }: SearchBoxProps) {
  const list = useId();
  const box = useRef<HTMLDivElement>(null);
  const navigate = useNavigate();
  const [active, setActive] = useState(-1);
  const [open, setOpen] = useState(false);
  const shown = open && text.trim().length >= 2;
  const close = () => {
    setOpen(false);
    setActive(-1);
  };
  const go = (item: SearchItem) => {
    close();
    onText('');
    void navigate(item.path);
  };
  const onKeyDown = (e: KeyboardEvent) => {
    if (e.key === 'Escape') return close();
    if (e.key === 'Enter') {
      const item = items[active] ?? items[0];
      if (item) go(item);
      return;
    }
    if (e.key !== 'ArrowDown' && e.key !== 'ArrowUp') return;
    e.preventDefault();
    setOpen(true);
    if (!items.length) return;
    const last = items.length - 1;
    if (e.key === 'ArrowDown') setActive(active >= last ? 0 : active + 1);
    else setActive(active <= 0 ? last : active - 1);
  };
  return (
    <div className="find-box" ref={box} onBlur={(e) => { if (!box.current?.contains(e.relatedTarget)) close(); }}>
      <label className="find" htmlFor={id}>
        <span className="vh">Find by name, identifier or hash</span>
        <svg width="14" height="14" viewBox="0 0 14 14" fill="none" stroke="currentColor" strokeWidth="1.4" aria-hidden="true"><circle cx="6" cy="6" r="4.3" /><path d="M9.2 9.2L13 13" /></svg>
        <input
          id={id} value={text} placeholder="Name, identifier or hash" autoComplete="off" spellCheck={false}
          role="combobox" aria-expanded={shown} aria-controls={list} aria-autocomplete="list"
          aria-activedescendant={shown && active >= 0 ? `${list}-${active}` : undefined}
          onChange={(e) => { onText(e.target.value); setOpen(true); setActive(-1); }}
          onFocus={() => setOpen(true)} onKeyDown={onKeyDown}
        />
      </label>
      <div className="find-list" id={list} role="listbox" aria-label="Found" hidden={!shown}>
        {items.map((item, i) => (
          <Link key={item.key} id={`${list}-${i}`} role="option" aria-selected={i === active} tabIndex={-1} to={item.path} onMouseDown={(e) => e.preventDefault()} onClick={() => go(item)}>
            <span>{item.name}</span><em>{item.kind}</em><em>{item.line}</em>
          </Link>
        ))}
        {note ? <p>{note}</p> : null}
      </div>
    </div>
  );
}
