// Line plots over the chart library. The page says what to show; colours and dashes are in run.css, so that
// themes and paper need no redraw. At most four redraws a second a page, none out of sight or in a hidden tab.
import ApexCharts from '../lib/apexcharts/apexcharts.esm.js';

const tick = 250;
const plots = new Map();   // element → { chart, spec, waiting, seen, unhover }
let turn = 0;

const nonce = () => document.querySelector('meta[name="csp-nonce"]')?.content || document.querySelector('script[nonce]')?.nonce || undefined;
const sight = new IntersectionObserver(entries => {
  for (const entry of entries) {
    const plot = plots.get(entry.target);
    if (plot) plot.seen = entry.isIntersecting;
  }
  draw();
}, { rootMargin: '200px' });
document.addEventListener('visibilitychange', () => draw());

export function show(element, text) {
  const plot = plots.get(element);
  if (plot) {
    plot.waiting = JSON.parse(text);
    draw();
    return;
  }
  const first = { chart: null, spec: JSON.parse(text), waiting: null, seen: true };
  plots.set(element, first);
  first.chart = new ApexCharts(element, options(first.spec));
  first.chart.render();
  first.unhover = hover(first, element);
  sight.observe(element);
}

export function remove(element) {
  const plot = plots.get(element);
  if (!plot) return;
  plots.delete(element);
  sight.unobserve(element);
  plot.unhover?.();
  plot.chart?.destroy();
}

// One plot a turn, the one that waits longest first: the map keeps the order of the last drawing.
function draw() {
  if (turn || document.hidden) return;
  for (const [element, plot] of plots) {
    if (!plot.waiting || !plot.seen) continue;
    plot.spec = plot.waiting;
    plot.waiting = null;
    plots.delete(element);
    plots.set(element, plot);
    plot.chart.updateOptions(options(plot.spec), false, false, false, false);
    turn = setTimeout(() => { turn = 0; draw(); }, tick);
    return;
  }
}

function options(spec) {
  const area = s => s.role === 'band' || s.role === 'cone';
  const narrow = matchMedia('(max-width: 720px)').matches;
  return {
    chart: {
      type: 'rangeArea', height: 236, width: '100%', nonce: nonce(), fontFamily: 'inherit',
      animations: { enabled: false }, toolbar: { show: false }, zoom: { enabled: false }, selection: { enabled: false },
    },
    series: spec.series.map(s => ({
      name: s.role, type: area(s) ? 'rangeArea' : 'line',
      data: s.points.map(p => ({ x: p.x, y: area(s) ? [p.y, p.top] : p.y ?? null, text: p.text })),
    })),
    stroke: { curve: 'straight', width: spec.series.map(s => s.role === 'path' ? 2 : s.role === 'median' ? 2.5 : 1) },
    markers: { size: spec.series.map(s => s.dots ? 3 : 0), strokeWidth: 0, hover: { size: 0, sizeOffset: 0 } },
    fill: { type: 'solid', opacity: 1 },
    states: { hover: { filter: { type: 'none' } }, active: { filter: { type: 'none' } } },
    legend: { show: false }, dataLabels: { enabled: false },
    grid: { padding: { left: 4, right: spec.y.opposite ? 44 : 10, top: 2, bottom: -4 }, position: 'back' },
    xaxis: {
      type: 'numeric', min: spec.x.low, max: spec.x.high, tickAmount: spec.x.ticks, tooltip: { enabled: false }, crosshairs: { show: false },
      labels: { rotate: 0, hideOverlappingLabels: true, formatter: v => label(spec.x, v) },
    },
    yaxis: {
      min: spec.y.low, max: spec.y.high, tickAmount: spec.y.ticks, forceNiceScale: false,
      labels: { minWidth: 34, maxWidth: 34, offsetX: -6, formatter: v => label(spec.y, v) },
    },
    annotations: {
      yaxis: [...spec.rules.filter(r => r.role === 'target').map(across), ...opposite(spec.y)],
      xaxis: spec.rules.filter(r => r.role !== 'target').flatMap(r => upright(r, narrow)),
      points: spec.notes.map(n => beside(n)),
    },
    tooltip: { enabled: false },
  };
}

function label(axis, value) {
  const at = Math.round((value - axis.low) / (axis.high - axis.low) * axis.ticks);
  return axis.labels[at] ?? '';
}

const plain = cssClass => ({ cssClass, background: 'transparent', padding: { left: 0, right: 0, top: 0, bottom: 0 }, fontSize: '12px' });

function across(rule) {
  return { y: rule.at, strokeDashArray: 0, borderColor: 'currentColor', label: { text: rule.before ?? '', borderColor: 'transparent', position: 'right', textAnchor: 'end', offsetX: -4, offsetY: 14, style: plain(`rule-${rule.role}`) } };
}

function upright(rule, narrow) {
  const side = (text, offset, anchor, lineOffset) => ({
    x: rule.at, offsetX: lineOffset, strokeDashArray: rule.role === 'cap' ? 4 : rule.role === 'cursor' ? 2 : 0, borderColor: 'currentColor',
    label: { text: text ?? '', borderColor: 'transparent', orientation: 'horizontal', textAnchor: anchor, offsetX: offset, ...(rule.role === 'cap' ? { position: 'bottom', offsetY: -8 } : { offsetY: -7 }), style: plain(`rule-${rule.role}${anchor === 'start' ? '-after' : ''}`) },
  });
  if (rule.role === 'now') return [side(rule.before, narrow ? -4 : -6, 'end', -1.5), side(rule.after, narrow ? 4 : 6, 'start', 1.5)];
  return [side(rule.before, -6, 'end', 0)];
}

function opposite(axis) {
  if (!axis.opposite) return [];
  const step = (axis.high - axis.low) / axis.ticks;
  return axis.opposite.map((text, i) => ({ y: axis.low + i * step, strokeDashArray: 0, borderColor: 'transparent', label: { text, borderColor: 'transparent', position: 'right', textAnchor: 'start', offsetX: 8, offsetY: 4, style: plain('rule-opposite') } }))
    .filter(a => a.label.text);
}

function beside(note) {
  return { x: note.x, y: note.y, marker: { size: 0 }, label: { text: note.text, borderColor: 'transparent', textAnchor: note.left ? 'end' : 'start', offsetX: note.left ? -8 : 8, offsetY: 0, style: plain(`note-${note.role}`) } };
}

// Hovering names the point nearest to the pointer, exact; the library's own box would not do it for bands and paths together.
function hover(plot, element) {
  const tip = document.createElement('p');
  tip.className = 'linechart-hover';
  tip.setAttribute('aria-hidden', 'true');
  const ring = document.createElement('span');
  ring.className = 'linechart-ring';
  tip.hidden = ring.hidden = true;
  element.parentElement.append(ring, tip);
  const leave = () => { tip.hidden = ring.hidden = true; };
  const move = event => {
    const g = plot.chart.w.globals, { x, y, series } = plot.spec;
    const box = element.getBoundingClientRect();
    const across = p => g.translateX + (p.x - x.low) / (x.high - x.low) * g.gridWidth;
    const down = p => g.translateY + (y.high - p.y) / (y.high - y.low) * g.gridHeight;
    let best = null, near = 60;
    for (const s of series) {
      for (const p of s.points) {
        if (!p.text || p.y === undefined) continue;
        const far = Math.hypot(across(p) - (event.clientX - box.left), 0.3 * (down(p) - (event.clientY - box.top)));
        if (far < near) [best, near] = [p, far];
      }
    }
    if (!best) return leave();
    tip.textContent = best.text;
    tip.hidden = ring.hidden = false;
    ring.style.transform = `translate(${across(best)}px, ${down(best)}px)`;
    const room = box.width - tip.offsetWidth - 4;
    tip.style.transform = `translate(${Math.max(0, Math.min(across(best) - tip.offsetWidth / 2, room))}px, ${down(best) > 60 ? down(best) - 38 : down(best) + 14}px)`;
  };
  element.addEventListener('pointermove', move);
  element.addEventListener('pointerleave', leave);
  return () => {
    element.removeEventListener('pointermove', move);
    element.removeEventListener('pointerleave', leave);
    tip.remove();
    ring.remove();
  };
}
