// Starts the page and keeps its word about the connection: a lost one is said at once, nothing looks live meanwhile, and it heals itself.
const root = document.documentElement;
const pauses = [0, 1, 2, 4, 8, 10];
let since = null;
let attempt = 0;
let timer = 0;

const clock = (date) => date.toTimeString().slice(0, 8);
const part = (id) => document.getElementById(id);
const write = (id, text) => { const at = part(id); if (at && at.textContent !== text) at.textContent = text; };

function lost() {
  if (since === null) since = new Date();
  root.classList.add('lost');
  write('lost-words', `Not connected since ${clock(since)}.`);
  if (part('lost-count')?.textContent === '') write('lost-count', 'This is what was known then.');
}

function found() {
  since = null;
  attempt = 0;
  clearTimeout(timer);
  root.classList.remove('lost');
  write('lost-words', '');
  write('lost-count', '');
}

async function retry() {
  clearTimeout(timer);
  write('lost-count', 'This is what was known then. Trying now.');
  try {
    // False: the server answers but no longer knows this page (it was started again). A fresh page is the cure.
    if (await Blazor.reconnect() === false) {
      sessionStorage.setItem('couplingwatch.scroll', String(scrollY));
      location.reload();
      return;
    }
    found();
  } catch {
    wait();
  }
}

function wait() {
  const due = Date.now() + 1000 * pauses[Math.min(++attempt, pauses.length - 1)];
  const count = () => {
    const left = Math.ceil((due - Date.now()) / 1000);
    if (left <= 0) { retry(); return; }
    write('lost-count', `This is what was known then. Trying again in ${left} s.`);
    timer = setTimeout(count, 250);
  };
  count();
}

document.addEventListener('click', (e) => { if (e.target instanceof Element && e.target.id === 'lost-retry') retry(); });
addEventListener('online', () => { if (since !== null) retry(); });
addEventListener('offline', lost);

// The skip link and others to a place on this page: with a base address set, a bare fragment would leave the page.
document.addEventListener('click', (e) => {
  const link = e.target instanceof Element ? e.target.closest('a[data-skip]') : null;
  if (!link) return;
  e.preventDefault();
  part(link.hash.slice(1))?.focus();
});

await Blazor.start({
  circuit: {
    reconnectionHandler: { onConnectionDown: () => { lost(); retry(); }, onConnectionUp: found },
    configureSignalR: (builder) => builder.withServerTimeout(15000).withKeepAliveInterval(5000),
  },
});

const scroll = sessionStorage.getItem('couplingwatch.scroll');
if (scroll !== null) {
  sessionStorage.removeItem('couplingwatch.scroll');
  requestAnimationFrame(() => scrollTo(0, Number(scroll)));
}

// Copies the text of the element a button names; where the browser allows no copying, selects it.
document.addEventListener('click', async (e) => {
  const button = e.target instanceof Element ? e.target.closest('[data-copy]') : null;
  const from = button && part(button.dataset.copy);
  if (!from) return;
  const word = button.textContent;
  try {
    await navigator.clipboard.writeText(from.textContent);
    button.textContent = 'Copied';
  } catch {
    getSelection().selectAllChildren(from);
    button.textContent = 'Selected';
  }
  setTimeout(() => { button.textContent = word; }, 2000);
});
