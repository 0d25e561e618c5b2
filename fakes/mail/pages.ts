import type { Markup } from '#server/features/mail/html'
import { html, raw } from '#server/features/mail/html'
import type { KeptMessage } from './messages'

export const MAX_LISTED_MESSAGES = 200

export const INBOX_CSS = `
:root { color: #1c2422; background: #f4f4f1; font: 15px/1.5 system-ui, sans-serif; }
body { margin: 0 auto; max-width: 60rem; padding: 16px; }
h1 { font-size: 21px; line-height: 1.3; margin: 8px 0 12px; overflow-wrap: anywhere; }
h2 { font-size: 15px; margin: 24px 0 8px; }
a { color: #1b4b8f; overflow-wrap: anywhere; }
a:focus-visible, input:focus-visible, button:focus-visible, summary:focus-visible, iframe:focus-visible, pre:focus-visible { outline: 2px solid #1b4b8f; outline-offset: 2px; }
form { display: flex; gap: 8px; flex-wrap: wrap; align-items: end; margin: 0 0 16px; }
label { display: grid; gap: 4px; flex: 1 1 14rem; font-size: 13px; }
input, button { box-sizing: border-box; font: inherit; font-size: 16px; min-height: 44px; padding: 8px 12px; border: 1px solid #6b7572; border-radius: 4px; background: #fff; color: inherit; min-width: 0; }
ul.list { list-style: none; margin: 0; padding: 0; background: #fff; border: 1px solid #cfd4d0; }
ul.list li + li { border-top: 1px solid #cfd4d0; }
ul.list a { display: block; padding: 12px; color: inherit; text-decoration: none; }
ul.list a:hover { background: #eef2f0; }
ul.list b { display: block; overflow-wrap: anywhere; }
.small { font-size: 13px; color: #4b5653; overflow-wrap: anywhere; }
dl { display: grid; grid-template-columns: max-content minmax(0, 1fr); gap: 4px 12px; margin: 0; font-size: 13px; }
dt { color: #4b5653; }
dd { margin: 0; overflow-wrap: anywhere; }
pre { background: #fff; border: 1px solid #cfd4d0; padding: 12px; margin: 0; white-space: pre-wrap; overflow-wrap: anywhere; font: 14px/1.5 ui-monospace, monospace; }
iframe { display: block; box-sizing: border-box; width: 100%; height: 75vh; min-height: 560px; border: 1px solid #cfd4d0; background: #fff; }
summary { min-height: 24px; cursor: pointer; }
.links { padding-left: 20px; margin: 0; }
.links li { padding: 6px 0; }
`

function page(title: string, body: Markup): string {
  return html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${title}</title>
<link rel="stylesheet" href="/inbox.css">
</head>
<body>
<main>
${body}
</main>
</body>
</html>
`.toString()
}

function whenText(ms: number): string {
  return new Date(ms).toISOString().replace('T', ' ').replace(/\.\d+Z$/, ' UTC')
}

function mailboxText(mailbox: KeptMessage['from']): string {
  if (!mailbox) return ''
  return mailbox.name ? `${mailbox.name} <${mailbox.address}>` : mailbox.address
}

/**
 * The list, newest first, at most `MAX_LISTED_MESSAGES`.
 *
 * @param messages oldest first, already filtered by `to`
 * @param to what the filter field holds
 */
export function inboxPage(messages: readonly KeptMessage[], to: string): string {
  const shown = messages.slice(-MAX_LISTED_MESSAGES).reverse()
  const heading = messages.length === 1 ? '1 letter caught' : `${messages.length} letters caught`
  const rows = shown.map(message => html`<li><a href="/messages/${message.id}">
<b>${message.subject || '(no subject)'}</b>
<span class="small">to ${message.envelope.to.join(', ')}, ${whenText(message.receivedAtMs)}</span>
</a></li>
`)
  return page(heading, html`<h1>${heading}</h1>
<p class="small">Nothing leaves this machine: every letter that the app sends stops here.</p>
<form method="get" action="/">
<label>Recipient holds <input name="to" type="search" value="${to}" autocomplete="off"></label>
<button>Filter</button>
</form>
${shown.length < messages.length ? html`<p class="small">The newest ${shown.length} of them.</p>` : ''}
${shown.length > 0
  ? html`<ul class="list">
${rows}</ul>`
  : html`<p>${to ? 'No letter to that recipient yet.' : 'No letter yet. Sign up or ask for a new password in the app, then look again.'}</p>`}`)
}

export function messagePage(message: KeptMessage): string {
  const headers = Object.entries(message.headers).map(([name, value]) => html`<dt>${name}</dt><dd>${value}</dd>
`)
  const links = message.links.map(link => html`<li><a href="${link}" target="_blank" rel="noopener noreferrer">${link}</a></li>
`)
  return page(message.subject || '(no subject)', html`<p><a href="/">All letters</a></p>
<h1>${message.subject || '(no subject)'}</h1>
<dl>
<dt>from</dt><dd>${mailboxText(message.from)}</dd>
<dt>to</dt><dd>${message.to.map(mailboxText).join(', ')}</dd>
<dt>delivered to</dt><dd>${message.envelope.to.join(', ')}</dd>
<dt>received</dt><dd>${whenText(message.receivedAtMs)}</dd>
</dl>
${links.length > 0
  ? html`<h2>Links</h2>
<ul class="links">
${links}</ul>`
  : ''}
${message.html === null
  ? html`<h2>HTML</h2>
<p>This letter has no HTML part.</p>`
  : html`<h2>HTML</h2>
<iframe title="The HTML part of the letter" src="/messages/${message.id}/html" sandbox="allow-popups allow-popups-to-escape-sandbox" referrerpolicy="no-referrer"></iframe>
<p><a href="/messages/${message.id}/html" target="_blank" rel="noopener noreferrer">Open the HTML part alone</a></p>`}
<h2>Text</h2>
${message.text === null ? html`<p>This letter has no text part.</p>` : html`<pre tabindex="0">${message.text}</pre>`}
<h2>Headers</h2>
<details><summary>${Object.keys(message.headers).length} headers as sent</summary>
<dl>
${headers}</dl>
</details>`)
}

/**
 * The HTML part as a page of its own. Its links open in a new tab: inside the sandboxed frame the app would
 * refuse to be shown. Everything else about it is as it was sent.
 */
export function htmlPartPage(part: string): string {
  const base = '<base target="_blank">'
  return /<head[^>]*>/i.test(part)
    ? part.replace(/<head[^>]*>/i, head => `${head}${base}`)
    : html`${raw(base)}${raw(part)}`.toString()
}
