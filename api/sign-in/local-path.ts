/** A path of this site to come back to, or '/'. Anything that a browser would read as another host becomes '/'. */
export function localPath(value: unknown): string {
  if (typeof value !== 'string' || value.length > 500 || !/^\/(?![/\\])[^\\\p{Cc}]*$/u.test(value)) return '/';
  const url = new URL(value, 'http://local.invalid');
  // Resolving dots can bring a double slash to the front: '/a/..//elsewhere' would leave the site.
  if (url.host !== 'local.invalid' || url.pathname.startsWith('//') || /^\/(auth|local-github|api)(\/|$)/.test(url.pathname)) return '/';
  return `${url.pathname}${url.search}${url.hash}`;
}
