import clsx from 'clsx';
import type { ComponentProps } from 'react';
import { Link, type LinkProps } from 'react-router-dom';

type Look = 'plain' | 'primary' | 'danger';
interface ButtonLook {
  look?: Look;
  big?: boolean;
}
const classOf = ({ look = 'plain', big = false }: ButtonLook, extra?: string): string =>
  clsx('btn', look === 'primary' && 'pri', look === 'danger' && 'dgr', big && 'big', extra);

export function Button({ look, big, className, type = 'button', ...rest }: ComponentProps<'button'> & ButtonLook) {
  return <button type={type} className={classOf({ look, big }, className)} {...rest} />;
}

/** A link that looks like a button: for going somewhere, not for doing something. */
export function ButtonLink({ look, big, className, ...rest }: LinkProps & ButtonLook) {
  return <Link className={classOf({ look, big }, className)} {...rest} />;
}

/** A download or another address outside the client's routes. */
export function ButtonAnchor({ look, big, className, ...rest }: ComponentProps<'a'> & ButtonLook) {
  return <a className={classOf({ look, big }, className)} {...rest} />;
}

/** A square button with a sign only; `label` is its name. */
export function IconButton({ label, className, type = 'button', ...rest }: ComponentProps<'button'> & { label: string }) {
  return <button type={type} className={clsx('ib', className)} aria-label={label} title={label} {...rest} />;
}

/** A button inside running text. */
export function TextButton({ className, type = 'button', ...rest }: ComponentProps<'button'>) {
  return <button type={type} className={clsx('lnk', className)} {...rest} />;
}
