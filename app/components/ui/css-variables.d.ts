import 'react';

declare module 'react' {
  /** Custom properties in `style`. */
  interface CSSProperties {
    [name: `--${string}`]: string | number | undefined;
  }
}
