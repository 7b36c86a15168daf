// What the browser knows of its reader: zone, last visit, whether the tab is seen, single-letter keys (off by default).
const looked = 'couplingwatch.looked';
const wanted = 'couplingwatch.keys';
const remember = (key, value) => { try { localStorage.setItem(key, value); } catch { /* storage is switched off: nothing is remembered */ } };
const recall = (key) => { try { return localStorage.getItem(key); } catch { return null; } };

let keys = recall(wanted) === 'on';
let page = null;

export function setKeys(on) {
  keys = on;
  remember(wanted, on ? 'on' : 'off');
}

export function begin(viewer) {
  page = viewer;
  const lookedAt = sessionStorage.getItem(looked) ?? recall(looked);
  // A reload within one visit is still the same visit.
  if (lookedAt !== null) sessionStorage.setItem(looked, lookedAt);
  const seen = () => { if (document.visibilityState === 'visible') remember(looked, new Date().toISOString()); };
  seen();
  setInterval(seen, 15000);
  addEventListener('pagehide', seen);
  document.addEventListener('visibilitychange', () => {
    seen();
    page.invokeMethodAsync('Hidden', document.visibilityState === 'hidden').catch(() => {});
  });
  addEventListener('keydown', press);
  return { zone: Intl.DateTimeFormat().resolvedOptions().timeZone, lookedAt, keys };
}

function press(e) {
  if (!keys || e.ctrlKey || e.altKey || e.metaKey) return;
  const at = e.target instanceof Element ? e.target : null;
  if (at?.closest('input:not([type="range"], [type="checkbox"], [type="radio"]), textarea, select, [contenteditable]')) return;
  const key = e.key.toLowerCase();
  if (key === 'j' || key === 'k') move(key === 'j' ? 1 : -1);
  else if (key === 'p') page.invokeMethodAsync('TogglePause').catch(() => {});
  else if (key === 'b') Blazor.navigateTo('./');
  else if (key === 'a') Blazor.navigateTo('alerts');
}

// The next or previous lane or alert, counted from the one that has the focus or stands at the top.
function move(by) {
  const lanes = [...document.querySelectorAll('main article')];
  if (lanes.length === 0) return;
  let at = lanes.findIndex((lane) => lane.contains(document.activeElement));
  if (at < 0) at = by > 0 ? -1 : lanes.length;
  const lane = lanes[Math.min(lanes.length - 1, Math.max(0, at + by))];
  lane.querySelector('a, button')?.focus();
}
