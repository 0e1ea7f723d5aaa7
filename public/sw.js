/*
 * Lets the app open without signal. Keeps the page, its scripts, fonts and pictures; never an answer of /api: what a
 * person read is kept per person by the app itself and goes at sign-out.
 */
const shelf = 'ebbmark-app'
const page = '/index.html'
const scriptPath = /\/_expo\/static\/js\/web\/[\w.[\]()+-]+\.js/g

self.addEventListener('install', (event) => {
  event.waitUntil(
    keepApp()
      .catch(() => undefined)
      .then(() => self.skipWaiting()),
  )
})

self.addEventListener('activate', (event) => {
  event.waitUntil(self.clients.claim())
})

self.addEventListener('fetch', (event) => {
  const { request } = event
  const address = new URL(request.url)
  if (request.method !== 'GET' || address.origin !== self.location.origin) return
  if (address.pathname.startsWith('/api/') || address.pathname === '/sw.js') return
  if (request.mode === 'navigate') event.respondWith(openPage(request))
  else if (isHashed(address.pathname)) event.respondWith(fromShelf(request))
  else event.respondWith(freshOrKept(request))
})

/** A name with a hash in it never changes its content. */
function isHashed(path) {
  return /[.-][0-9a-f]{32}\./.test(path)
}

/** The newest page when there is signal; a page that names new scripts brings them onto the shelf. */
async function openPage(request) {
  const kept = await caches.match(page)
  try {
    const answer = await fetch(request)
    if (answer.ok && (answer.headers.get('Content-Type') ?? '').includes('text/html')) {
      const text = await answer.clone().text()
      if (kept === undefined || (await kept.clone().text()) !== text) {
        void keepApp().catch(() => undefined)
      }
    }
    return answer
  } catch (error) {
    if (kept !== undefined) return kept
    throw error
  }
}

async function fromShelf(request) {
  const kept = await caches.match(request)
  if (kept !== undefined) return kept
  const answer = await fetch(request)
  if (answer.ok) await (await caches.open(shelf)).put(request, answer.clone())
  return answer
}

async function freshOrKept(request) {
  try {
    const answer = await fetch(request)
    if (answer.ok) await (await caches.open(shelf)).put(request, answer.clone())
    return answer
  } catch (error) {
    const kept = await caches.match(request)
    if (kept !== undefined) return kept
    throw error
  }
}

/**
 * Fetches the page and every script it can come to need, also those of routes not yet opened: their names stand in
 * the scripts themselves. What no longer belongs to the page is taken off the shelf.
 */
async function keepApp() {
  const store = await caches.open(shelf)
  const answer = await fetch(page, { cache: 'no-store' })
  if (!answer.ok) return
  const text = await answer.clone().text()
  const wanted = new Set(['/app.css', '/manifest.webmanifest', '/favicon.svg'])
  const unread = text.match(scriptPath) ?? []
  for (const font of text.match(/\/fonts\/[\w.-]+/g) ?? []) wanted.add(font)
  while (unread.length > 0) {
    const script = unread.pop()
    if (wanted.has(script)) continue
    wanted.add(script)
    const body = await (await keep(store, script)).text()
    unread.push(...(body.match(scriptPath) ?? []))
  }
  for (const path of wanted) {
    if (!path.endsWith('.js')) await keep(store, path).catch(() => undefined)
  }
  await store.put(page, answer)
  for (const request of await store.keys()) {
    const { pathname } = new URL(request.url)
    if (pathname.endsWith('.js') && !wanted.has(pathname)) await store.delete(request)
  }
}

async function keep(store, path) {
  const kept = isHashed(path) ? await store.match(path) : undefined
  if (kept !== undefined) return kept
  const answer = await fetch(path)
  if (!answer.ok) throw new Error(`${path} answered ${answer.status}`)
  await store.put(path, answer.clone())
  return answer
}
