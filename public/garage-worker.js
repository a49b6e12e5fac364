// Keeps the garage page and the assets it names, so that it opens with no signal. It holds no data: what people type
// is in IndexedDB, and answers of the server are never cached here.

const cacheName = 'witnessmark-garage-page';
const pagePath = '/garage';
const noSignalUrl = '/garage#no-signal';
const patienceInMilliseconds = 4000;

const assetForm = /\/_next\/static\/[\w./~-]+\.(?:js|css|woff2?|ttf)/g;
const urlInStyle = /url\(\s*["']?([^"')]+)["']?\s*\)/g;

/** The page's assets: what its HTML names, and what its style sheets name. */
async function assetsOf(html) {
  const named = new Set(html.match(assetForm) ?? []);
  // The page's data names chunks without the leading folder.
  for (const [, chunk] of html.matchAll(/["\\](static\/chunks\/[\w./~-]+\.(?:js|css))/g)) named.add(`/_next/${chunk}`);
  const sheets = [...named].filter((url) => url.endsWith('.css'));
  for (const sheet of sheets) {
    const text = await (await fetch(sheet)).text();
    for (const [, url] of text.matchAll(urlInStyle)) {
      const asset = new URL(url, new URL(sheet, self.location.origin));
      if (asset.origin === self.location.origin) named.add(asset.pathname);
    }
  }
  return named;
}

/** Stores a page once all its assets are stored; only then does it replace the one before. */
async function keepPage(response) {
  if (!response.ok || response.redirected) return;
  const cache = await caches.open(cacheName);
  const page = response.clone();
  const assets = await assetsOf(await response.text());
  for (const asset of assets) {
    if (await cache.match(asset)) continue;
    const answer = await fetch(asset);
    if (!answer.ok) throw new Error(`${asset}: ${answer.status}`);
    await cache.put(asset, answer);
  }
  await cache.put(pagePath, page);
  for (const request of await cache.keys()) {
    const { pathname } = new URL(request.url);
    if (pathname !== pagePath && !assets.has(pathname)) await cache.delete(request);
  }
}

async function garagePage(event) {
  const fromServer = fetch(event.request);
  // Asked for at once: after the kept page has been given, the browser would not let the worker live for it.
  const copy = fromServer.then((response) => response.clone());
  event.waitUntil(copy.then(keepPage).catch(() => undefined));
  const kept = await caches.match(pagePath, { cacheName });
  if (!kept) return fromServer;
  // A bar of signal that carries nothing is as good as none.
  const tooLong = new Promise((resolve) => setTimeout(() => resolve(kept), patienceInMilliseconds));
  const usable = fromServer.then((response) => (response.status >= 500 ? kept : response)).catch(() => kept);
  return Promise.race([usable, tooLong]);
}

async function otherPage(request) {
  try {
    return await fetch(request);
  } catch (error) {
    if (!(await caches.match(pagePath, { cacheName }))) throw error;
    return Response.redirect(noSignalUrl, 302);
  }
}

async function asset(request) {
  return (await caches.match(request, { cacheName, ignoreVary: true })) ?? fetch(request);
}

self.addEventListener('install', (event) => {
  event.waitUntil(
    fetch(pagePath, { cache: 'reload' })
      .then(keepPage)
      .then(() => self.skipWaiting()),
  );
});

self.addEventListener('activate', (event) => {
  event.waitUntil(self.clients.claim());
});

self.addEventListener('fetch', (event) => {
  const { request } = event;
  const url = new URL(request.url);
  if (request.method !== 'GET' || url.origin !== self.location.origin) return;
  if (url.pathname.startsWith('/_next/static/')) event.respondWith(asset(request));
  else if (request.mode !== 'navigate') return;
  else if (url.pathname === pagePath) event.respondWith(garagePage(event));
  else event.respondWith(otherPage(request));
});
