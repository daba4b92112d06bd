const escapes: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };
const escape = (text: string): string => text.replace(/[&<>"']/g, (character) => escapes[character] ?? '');

/** The stand-in's own authorisation page: one line for each demonstration account. */
export function renderAuthorizePage(
  accounts: readonly { handle: string; line: string; href: string }[],
  cancelHref: string,
  styleHref: string,
): string {
  const rows = accounts
    .map(
      ({ handle, line, href }) =>
        `<li><b>${escape(handle)}</b><span>${escape(line)}</span><a class="take" href="${escape(href)}" aria-label="Sign in as ${escape(handle)}">Take role</a></li>`,
    )
    .join('\n');
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width,initial-scale=1">
<title>Local stand-in for sign-in · Hadamark</title>
<link rel="stylesheet" href="${escape(styleHref)}">
</head>
<body>
<main>
<h1>Choose a demo account</h1>
<section aria-labelledby="what">
<h2 id="what"><svg width="16" height="16" viewBox="-8 -8 16 16" aria-hidden="true"><path class="tri" d="M0-6.4L7 5.6H-7Z"/><path class="bang" d="M0-2.4V1.8M0 3.2V4.3"/></svg>Local stand-in: this machine only</h2>
<p>No GitHub client is set up here, so this page stands in for GitHub's. In production it does not exist and its address refuses.</p>
<ul>
${rows}
</ul>
</section>
<p><a href="${escape(cancelHref)}">Go back without signing in</a></p>
</main>
</body>
</html>
`;
}

export const standInStyle = `:root{color-scheme:light dark;--paper:#F2F5F1;--sheet:#FBFCFA;--ink:#14201F;--ink-2:#42504D;--hair:#CFD7D1;--line:#74827D;--petrol:#0A5A66;--amber:#7A5200;--amber-mark:#BC8000;--amber-wash:#F8EDD0}
@media (prefers-color-scheme:dark){:root{--paper:#0E1514;--sheet:#141D1C;--ink:#E6ECE8;--ink-2:#B2BEB9;--hair:#2A3634;--line:#778782;--petrol:#74C8CE;--amber:#E9BC5C;--amber-mark:#E3A92F;--amber-wash:#33280F}}
*{box-sizing:border-box}
body{margin:0;background:var(--paper);color:var(--ink);font:400 14px/1.5 "Inter",system-ui,sans-serif}
main{max-width:600px;margin:0 auto;padding:40px 16px}
h1{font:500 26px/1.2 "Source Serif 4",Georgia,serif;margin:0 0 18px}
section{border:1.5px dashed var(--amber-mark);background:var(--sheet)}
h2{display:flex;gap:10px;align-items:center;margin:0;padding:10px 18px;border-bottom:1.5px dashed var(--amber-mark);color:var(--amber);font:600 14px/1.4 "Inter",system-ui,sans-serif;background:repeating-linear-gradient(-45deg,var(--amber-wash) 0 10px,transparent 10px 20px),var(--amber-wash)}
.tri{fill:var(--amber-wash);stroke:var(--amber);stroke-width:1.5}.bang{fill:none;stroke:var(--amber);stroke-width:1.5}
section p{margin:0;padding:11px 18px;border-bottom:1px solid var(--hair);font-size:13px;color:var(--ink-2)}
ul{list-style:none;margin:0;padding:0}
li{display:grid;grid-template-columns:minmax(0,1fr) auto;gap:1px 14px;padding:9px 18px;border-top:1px solid var(--hair);align-items:center}
li:first-child{border-top:0}
li b{font-weight:550;font-size:13.5px}
li span{grid-column:1;font-size:12.5px;line-height:1.4;color:var(--ink-2)}
a{color:var(--petrol)}
.take{grid-row:1/3;grid-column:2;display:inline-flex;align-items:center;min-height:34px;padding:0 14px;border:1px solid var(--line);border-radius:2px;color:var(--ink);text-decoration:none;font-weight:500;font-size:13.5px}
.take:hover{border-color:var(--ink)}
a:focus-visible{outline:2px solid var(--petrol);outline-offset:2px}
@media (max-width:700px){li{padding:11px 14px}.take{min-height:42px}}
`;
