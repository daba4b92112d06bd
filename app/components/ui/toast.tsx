import { createContext, useCallback, useContext, useMemo, useRef, useState, type ReactNode } from 'react';

interface Toast {
  id: number;
  text: ReactNode;
  undo?: () => void;
}
interface ToastOptions {
  /** Called when the reader takes the step back within six seconds. */
  undo?: () => void;
}
type ShowToast = (text: ReactNode, options?: ToastOptions) => void;

const lifetimeMs = 6000;
const ToastContext = createContext<ShowToast>(() => undefined);

/** `toast('Verdict recorded.', {undo})`. Never the only copy of a message. */
export const useToast = (): ShowToast => useContext(ToastContext);

export function ToastProvider({ children }: { children: ReactNode }) {
  const [toasts, setToasts] = useState<readonly Toast[]>([]);
  const next = useRef(1);
  const drop = useCallback((id: number) => setToasts((all) => all.filter((t) => t.id !== id)), []);
  const show = useCallback<ShowToast>(
    (text, options = {}) => {
      const id = next.current++;
      setToasts((all) => [...all, { id, text, undo: options.undo }]);
      window.setTimeout(() => drop(id), lifetimeMs);
    },
    [drop],
  );
  const list = useMemo(
    () => (
      <div className="toasts" role="status" aria-live="polite">
        {toasts.map((t) => (
          <div className="toast" key={t.id}>
            <span>{t.text}</span>
            {t.undo ? (
              <button type="button" onClick={() => { t.undo?.(); drop(t.id); }}>Undo</button>
            ) : null}
          </div>
        ))}
      </div>
    ),
    [toasts, drop],
  );
  return (
    <ToastContext.Provider value={show}>
      {children}
      {list}
    </ToastContext.Provider>
  );
}
