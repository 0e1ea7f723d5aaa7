/** Lets the app open without signal; only in the built app, where scripts have lasting names. */
export function registerServiceWorker(): void {
  if (process.env.NODE_ENV !== 'production' || !('serviceWorker' in navigator)) return
  // A browser that refuses (private window, no secure origin) still works with signal.
  void navigator.serviceWorker.register('/sw.js').catch(() => undefined)
}
