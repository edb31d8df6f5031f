import type { Endpoint } from './endpoint.ts'

const escape = (text: string): string => text.replace(/[&<>"]/g, (character) => `&#${character.charCodeAt(0)};`)

const STYLE_SHEET = '/api-page.css'

function rowOf({ method, path, summary, allow, idempotent, status, problems }: Endpoint): string {
  const refusals = [...new Set([...(allow === 'anyone' ? [] : [401, 403]), 422, ...problems])].sort((a, b) => a - b).join(' ')
  return `<tr><td><code>${method.toUpperCase()} /api${escape(path)}</code></td><td>${escape(summary)}</td><td>${escape(allow)}</td><td>${status}</td><td>${refusals}</td><td>${idempotent ? 'yes' : ''}</td></tr>`
}

/** The API as a page that a person reads: every endpoint, who may call it, what it answers. Nothing is loaded from outside. */
export function apiPage(endpoints: readonly Endpoint[], version: string): string {
  const areas = new Map<string, Endpoint[]>()
  for (const endpoint of endpoints) {
    const area = endpoint.path.split('/')[1] ?? ''
    areas.set(area, [...(areas.get(area) ?? []), endpoint])
  }
  const sections = [...areas].map(
    ([area, list]) =>
      `<section><h2>${escape(area.replaceAll('-', ' '))}</h2><table><thead><tr><th>Endpoint</th><th>What it does</th><th>Permission</th><th>Answers</th><th>Refuses with</th><th>Needs an Idempotency-Key</th></tr></thead><tbody>${list.map(rowOf).join('')}</tbody></table></section>`,
  )
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><title>Scruple API ${escape(version)}</title><link rel="stylesheet" href="${STYLE_SHEET}"></head><body><main><h1>Scruple API</h1><p>Version ${escape(version)}. Send JSON, with <code>Authorization: Bearer</code> and the access token of <code>POST /api/auth/sign-in</code>. Refusals are problem documents (RFC 9457): a type that stays the same, one sentence, and for each field at fault its JSON pointer. The same, for programs, with every schema: <a href="/api/openapi.json">/api/openapi.json</a> (OpenAPI 3.1).</p>${sections.join('')}</main></body></html>`
}
