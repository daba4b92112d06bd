import { useEffect, useId, useRef, type ReactNode } from 'react';
import { Button } from './button';

interface DialogProps {
  open: boolean;
  onClose: () => void;
  title: ReactNode;
  children?: ReactNode;
  /** The row of buttons. */
  actions?: ReactNode;
}

/** The double frame on the native modal dialog: Escape closes, focus stays inside and returns where it came from. */
export function Dialog({ open, onClose, title, children, actions }: DialogProps) {
  const ref = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog) return;
    // jsdom has no showModal; the attribute alone then shows the content.
    if (open && !dialog.open) {
      if (typeof dialog.showModal === 'function') dialog.showModal();
      else dialog.setAttribute('open', '');
    }
    if (!open && dialog.open) {
      if (typeof dialog.close === 'function') dialog.close();
      else dialog.removeAttribute('open');
    }
  }, [open]);
  return (
    <dialog
      ref={ref}
      className="dlg"
      aria-labelledby={id}
      onCancel={(e) => {
        e.preventDefault();
        onClose();
      }}
      onClose={onClose}
    >
      {open ? (
        <>
          <h3 id={id}>{title}</h3>
          {children}
          {actions ? <div className="act">{actions}</div> : null}
        </>
      ) : null}
    </dialog>
  );
}

interface ConfirmProps {
  open: boolean;
  /** Names the thing: 'Withdraw Rim pair and bar, version 1?' */
  title: ReactNode;
  /** The consequence, and a field where a reason is asked. */
  children?: ReactNode;
  confirmLabel: string;
  keepLabel?: string;
  danger?: boolean;
  pending?: boolean;
  disabled?: boolean;
  onConfirm: () => void;
  onClose: () => void;
}

/** Names the thing and the consequence. The safe answer has the focus. */
export function Confirm({ open, title, children, confirmLabel, keepLabel = 'Keep it', danger = false, pending = false, disabled = false, onConfirm, onClose }: ConfirmProps) {
  return (
    <Dialog
      open={open}
      onClose={onClose}
      title={title}
      actions={
        <>
          <Button look={danger ? 'danger' : 'primary'} disabled={pending || disabled} onClick={onConfirm}>{confirmLabel}</Button>
          <Button autoFocus onClick={onClose}>{keepLabel}</Button>
        </>
      }
    >
      {children}
    </Dialog>
  );
}
