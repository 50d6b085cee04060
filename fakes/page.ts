const STYLE = `
:root { color-scheme: light dark; --paper: #f7f3ea; --card: #fffdf8; --line: #e3dac8;
  --ink: #1b1c33; --soft: #5d5a6e; --ember: #b3361a; --tide: #0f6e78; }
@media (prefers-color-scheme: dark) { :root { --paper: #0f1022; --card: #171932; --line: #2b2d50;
  --ink: #ece7da; --soft: #a9a5bd; --ember: #ff7a52; --tide: #56c0c6; } }
* { box-sizing: border-box; }
body { margin: 0; background: var(--paper); color: var(--ink); font: 1rem/1.5 system-ui, sans-serif; }
header { background: var(--card); border-bottom: 1px solid var(--line); padding-block: .8rem; }
header, main { padding-inline: max(1rem, calc(50vw - 26rem)); }
header a { color: inherit; text-decoration: none; font-weight: 600; }
header p, .soft { color: var(--soft); margin: 0; font-size: .875rem; }
h1 { font-size: 1.25rem; line-height: 1.3; overflow-wrap: anywhere; }
a { color: var(--tide); }
a:focus-visible { outline: 2px solid var(--ember); outline-offset: 2px; }
ol { list-style: none; margin: 1rem 0; padding: 0; border: 1px solid var(--line); background: var(--card); }
li + li { border-top: 1px solid var(--line); }
li a, li div { display: block; padding: .7rem 1rem; color: inherit; text-decoration: none; }
li a:hover { background: var(--paper); }
li strong { display: block; overflow-wrap: anywhere; }
time { font-family: ui-monospace, monospace; font-size: .875rem; }
dl { display: grid; grid-template-columns: max-content 1fr; gap: .2rem 1rem; margin: 0 0 1rem; }
dt { color: var(--soft); } dd { margin: 0; overflow-wrap: anywhere; }
pre { background: var(--card); border: 1px solid var(--line); padding: 1rem; margin: 0;
  white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; }`;

/** Frames a fake's page in the product's colours; `body` and `head` are markup, the rest plain text. */
export function page(options: {
	site: string;
	note: string;
	title: string;
	body: string;
	/** Whether the page renews itself every 5 s. */
	renews?: boolean;
}): string {
	const { site, note, title, body, renews = false } = options;
	return `<!doctype html>
<html lang="en"><head><meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
${renews ? '<meta http-equiv="refresh" content="5">' : ''}
<title>${escaped(title)} · ${escaped(site)}</title><style>${STYLE}</style></head>
<body><header><a href="/">${escaped(site)}</a><p>${escaped(note)}</p></header>
<main><h1>${escaped(title)}</h1>${body}</main></body></html>`;
}

/** Text made safe to stand in markup or in a quoted attribute. */
export function escaped(text: string): string {
	return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}

/** An ISO instant as a UTC time to the second. */
export function instant(iso: string): string {
	return `<time datetime="${iso}">${iso.slice(0, 10)} ${iso.slice(11, 19)} UTC</time>`;
}
