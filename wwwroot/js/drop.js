// Takes a dropped or chosen recording to the server and hands the page what it shows of the answer.
let sending = null;

export function begin(zoneId, inputId, page) {
  const zone = document.getElementById(zoneId);
  const input = document.getElementById(inputId);
  if (!zone || !input) return;
  zone.addEventListener('dragover', (e) => { e.preventDefault(); zone.classList.add('over'); });
  zone.addEventListener('dragleave', () => zone.classList.remove('over'));
  zone.addEventListener('drop', (e) => {
    e.preventDefault();
    zone.classList.remove('over');
    if (e.dataTransfer?.files.length) send(e.dataTransfer.files[0], page);
  });
  input.addEventListener('change', () => { if (input.files.length) send(input.files[0], page); input.value = ''; });
}

export function cancel() {
  sending?.abort();
}

async function send(file, page) {
  cancel();
  const mine = sending = new AbortController();
  await page.invokeMethodAsync('Reading', file.name);
  let answer;
  try {
    const reply = await fetch('api/examinations', { method: 'POST', headers: { 'Content-Type': 'application/x-ndjson' }, body: file, signal: mine.signal });
    answer = JSON.stringify(reply.ok ? short(await reply.json()) : await trouble(reply));
  } catch (e) {
    answer = e.name === 'AbortError' ? '' : JSON.stringify({ problem: 'The server did not answer.' });
  }
  if (sending === mine) sending = null;
  await page.invokeMethodAsync('Judged', answer).catch(() => {});
}

async function trouble(reply) {
  try {
    const problem = await reply.json();
    return { problem: problem.detail ?? problem.title ?? `The server answered ${reply.status}.` };
  } catch {
    return { problem: `The server answered ${reply.status}.` };
  }
}

// The circuit carries small messages only: the first twenty alerts say enough.
function short(found) {
  return {
    verdict: found.verdict, steps: found.steps, iterations: found.iterations, alertCount: found.alerts.length,
    alerts: found.alerts.slice(0, 20).map(({ check, severity, step, iteration, text }) => ({ check, severity, step, iteration, text })),
    advice: found.advice.slice(0, 5).map((a) => a.text), notJudged: found.notJudged.slice(0, 20),
  };
}
