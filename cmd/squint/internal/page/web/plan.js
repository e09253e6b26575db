// The room from above: section, workstations, and the work plane's light.
import { designs, load, whole, percent, year, sunAt } from "./data.js";
import { state, show } from "./state.js";
import { Scale, css, legend, luxScale, shareScale } from "./colour.js";
import { sheet, text, line, place } from "./paper.js";
import { room, section, beams } from "./mesh.js";
import { film, best } from "./film.js";

const canvas = document.getElementById("c-plan"), reading = document.getElementById("r-plan"), pick = document.getElementById("pick-metric");
let view = null; // how the last drawing lies, and what it shows
let drawn = -1; // the design of that drawing

// Choices of the drawing.
const sunny = 500; // lx on a plane that faces the sun, from which its patches are drawn
const overDesk = 0.3, overFloor = 1.1; // metres of the cut above the work plane, or the floor
const around = 0.9; // metres drawn around receivers and openings

export async function plan() {
  const d = designs[state.design], y = await year(state.design), m = await room(y, state.record);
  if (drawn !== state.design) { drawn = state.design; at = 0; }
  metrics(d);
  const box = extent(d), cut = cutHeight(d);
  const pad = 26, wide = box[2] - box[0], high = box[3] - box[1];
  const { g, w, h } = sheet(canvas, (w) => Math.max(200, Math.min(760, ((w - 2 * pad) * high) / wide + 2 * pad + 34)));
  const s = Math.min((w - 2 * pad) / wide, (h - 2 * pad - 34) / high), left = (w - s * wide) / 2;
  const to = (p) => [left + (p[0] - box[0]) * s, pad + (box[3] - p[1]) * s];
  const cells = await light(d, y);
  view = { to, s, cells, d, box };
  if (cells) for (const c of cells.points) {
    const [x, yy] = to([c.x, c.y]), q = c.size * s;
    g.fillStyle = cells.scale.css(c.v);
    g.fillRect(x - q / 2, yy - q / 2, q + 0.4, q + 0.4);
  }
  const moment = y.byRecord[state.record];
  if (moment >= 0 && y.moments.direct[moment] > sunny) sunPatches(g, m, sunAt(y, moment), to, cut);
  drawing(g, m, to, cut, box);
  d.views.forEach((v, i) => { if (i !== state.view) marker(g, to(v.position), v, i); });
  if (d.views[state.view]) marker(g, to(d.views[state.view].position), d.views[state.view], state.view);
  north(g, d.north, w - 26, 30);
  bar(g, s, left, h - 12);
  dimension(g, to, d, box);
  canvas.setAttribute("aria-label", `Plan of the room, cut at ${cut.toFixed(2)} m, with ${d.views.length} viewpoints. The table beside it has their verdicts.`);
  if (cells) {
    legend(document.getElementById("l-plan"), cells.scale, cells.unit, cells.ticks, ["hatched: sun on floor and desks", "\u25CB met", "\u25CF not met", "\u25D0 undecided"]);
    say(null);
  } else { document.getElementById("l-plan").replaceChildren(); reading.textContent = d.planes.length ? "This page holds no illuminance of this work plane." : ""; }
}

function metrics(d) {
  const list = (d.planes.length ? d.planes[0].metrics || [] : []).map((m) => [m.key, m.title]);
  if (hourly(d)) list.unshift(["hour", "illuminance at the chosen hour"]);
  if (list.length && !list.some(([key]) => key === state.metric)) state.metric = list[0][0];
  const key = list.join();
  if (pick.dataset.list === key) return;
  pick.dataset.list = key;
  pick.replaceChildren(...list.map(([value, name]) => new Option(name, value)));
  pick.value = state.metric;
}

// hourly is whether the page holds the illuminance of any hour, on all planes.
const hourly = (d) => d.planes.every(best);
pick.addEventListener("change", () => show({ metric: pick.value }));

// light reads what each sensor has, for the chosen metric; null where there is none.
async function light(d, y, metric = state.metric) {
  if (!d.planes.length || (metric === "hour" && !hourly(d))) return null;
  const out = { points: [], scale: luxScale, unit: "lx", ticks: [30, 100, 300, 1000, 3000, 10000].map((v) => [v, whole(v)]), median: 0 };
  for (const p of d.planes) {
    const at = await load(p.points);
    if (!at) continue;
    let value;
    if (metric === "hour") {
      const f = await film(p, 24 * y.n), frame = f ? f.frame(state.record) : -1;
      const v = frame < 0 ? null : f.values(frame);
      value = (i) => (v ? v[i] : 0);
      out.median = Math.max(out.median, f ? f.exact.median_error : 0);
    } else {
      const k = p.metrics.find((m) => m.key === metric) || p.metrics[0];
      out.scale = k.unit === "%" ? shareScale(k.most) : new Scale("cividis", 0, k.most, false);
      out.unit = `${k.title}${k.unit === "%" ? "" : ", " + k.unit}`;
      out.share = k.unit === "%";
      out.ticks = [0, 0.25, 0.5, 0.75, 1].map((t) => [t * k.most, k.unit === "%" ? percent(t * k.most) : whole(t * k.most)]);
      value = (i) => at[k.key][i] / k.scale;
    }
    for (let i = 0; i < at.x.length; i++) out.points.push({ x: p.origin[0] + at.x[i] / 1000, y: p.origin[1] + at.y[i] / 1000, z: p.height, size: p.spacing, v: value(i) });
  }
  return out;
}
export const planeLight = (d, y) => light(d, y, "hour");

function cutHeight(d) { return d.planes.length ? d.planes[0].height + overDesk : d.room.min[2] + overFloor; }

// extent is what is drawn: receivers and openings with some room around them.
export function extent(d) {
  const xs = [], ys = [];
  const put = (p) => { xs.push(p[0]); ys.push(p[1]); };
  d.planes.forEach((p) => p.polygon.forEach(put)); d.views.forEach((v) => put(v.position)); d.room.openings.forEach((o) => o.corners.forEach(put));
  if (!xs.length) { put(d.room.min); put(d.room.max); }
  return [Math.min(...xs) - around, Math.min(...ys) - around, Math.max(...xs) + around, Math.max(...ys) + around];
}

function drawing(g, m, to, cut, box) {
  const inside = (p) => p[0] > box[0] - 0.3 && p[0] < box[2] + 0.3 && p[1] > box[1] - 0.3 && p[1] < box[3] + 0.3;
  const floor = Math.min(...m.room.openings.map((o) => o.corners[0][2]), cut) - 3;
  for (const e of m.edges) {
    if (!inside(e.a) || !inside(e.b)) continue;
    if (e.a[2] < cut && e.b[2] < cut && Math.max(e.a[2], e.b[2]) > floor) line(g, [to(e.a), to(e.b)], "quiet", 0.5);
    else if (e.i >= m.fabric && Math.min(e.a[2], e.b[2]) > cut) line(g, [to(e.a), to(e.b)], "quiet", 0.6, [4, 3]);
  }
  for (const [a, b] of section(m, cut)) if (inside(a) && inside(b)) line(g, [to(a), to(b)], "ink", 1.8);
  for (const o of m.room.openings) line(g, [to(o.corners[0]), to(o.corners[1])], "sun", 2.4);
}

function sunPatches(g, m, sun, to, cut) {
  g.fillStyle = hatch(g);
  for (const p of beams(m, sun, 12).patches) {
    if (p.n[2] < 0.7 || p.at[2] > cut) continue;
    g.beginPath(); p.quad.forEach((q, i) => (i ? g.lineTo(...to(q)) : g.moveTo(...to(q)))); g.fill();
  }
}

// hatch is how sun on the floor and on desks is drawn: the light stays readable.
function hatch(g) {
  const c = document.createElement("canvas"), n = 12;
  c.width = c.height = n;
  const h = c.getContext("2d");
  h.strokeStyle = css("sun"); h.lineWidth = 2.6;
  for (const d of [-n, 0, n]) { h.beginPath(); h.moveTo(d - 2, n + 2); h.lineTo(d + n + 2, -2); h.stroke(); }
  const p = g.createPattern(c, "repeat");
  p.setTransform(new DOMMatrix().scale(0.5));
  return p;
}

// Of a grid several views share a place: there the wedge tells the outcome, and
// only the chosen one has its name beside it.
const gridReach = 17; // pixels

// tint is the colour of an outcome; where nothing is asked it is plain.
const tint = (v) => css({ met: "met", "not met": "not", none: "quiet" }[v.outcome] || "ink");
const filled = (v) => v.outcome === "not met", halved = (v) => v.outcome === "undecided";

function wedge(g, [x, y], v, i) {
  const dir = Math.atan2(-v.axes[0][1], v.axes[0][0]), chosen = i === state.view;
  const sector = (r) => { g.beginPath(); g.moveTo(x, y); g.arc(x, y, r, dir - 0.5, dir + 0.5); g.closePath(); };
  const colour = tint(v);
  sector(gridReach); g.fillStyle = css("paper"); g.fill();
  if (filled(v) || halved(v)) { sector(filled(v) ? gridReach : gridReach / 2); g.fillStyle = colour; g.fill(); }
  sector(gridReach); g.strokeStyle = chosen ? css("ink") : colour; g.lineWidth = chosen ? 2.4 : 1; g.stroke();
  if (chosen) text(g, v.name, x, y - gridReach - 9, { align: "center", colour: "ink", size: 11.5, weight: 700, halo: true });
}

// handle is where a click chooses the view.
const handle = (v) => (v.grid ? v.position.map((p, k) => p + (v.axes[0][k] * gridReach) / 2 / view.s) : v.position);

function marker(g, [x, y], v, i) {
  if (v.grid) return wedge(g, [x, y], v, i);
  const dir = Math.atan2(-v.axes[0][1], v.axes[0][0]), chosen = i === state.view;
  g.beginPath(); g.moveTo(x, y); g.arc(x, y, 26, dir - 0.5, dir + 0.5); g.closePath();
  g.fillStyle = chosen ? css("sun") : css("paper"); g.globalAlpha = chosen ? 0.55 : 0.6; g.fill(); g.globalAlpha = 1;
  g.strokeStyle = css("ink"); g.lineWidth = chosen ? 1.6 : 0.8; g.stroke();
  const colour = tint(v);
  g.beginPath(); g.arc(x, y, 5.5, 0, 7); g.fillStyle = css("paper"); g.fill();
  g.beginPath();
  if (filled(v)) g.arc(x, y, 5.5, 0, 7); else if (halved(v)) g.arc(x, y, 5.5, Math.PI / 2, 1.5 * Math.PI);
  g.fillStyle = colour; g.fill();
  g.beginPath(); g.arc(x, y, 5.5, 0, 7); g.strokeStyle = colour; g.lineWidth = 1.8; g.stroke();
  const back = [x - 15 * Math.cos(dir), y - 15 * Math.sin(dir)];
  text(g, v.name, back[0], back[1], { align: Math.cos(dir) > 0.4 ? "right" : Math.cos(dir) < -0.4 ? "left" : "center", colour: "ink", size: 11.5, weight: chosen ? 700 : 400, halo: true });
}

// north points its arrow to where the model's north lies.
function north(g, angle, x, y) {
  const d = [-Math.sin(angle), -Math.cos(angle)];
  line(g, [[x - 13 * d[0], y - 13 * d[1]], [x + 13 * d[0], y + 13 * d[1]]], "ink", 1);
  g.beginPath(); g.moveTo(x + 15 * d[0], y + 15 * d[1]); g.lineTo(x + 5 * d[0] - 4 * d[1], y + 5 * d[1] + 4 * d[0]); g.lineTo(x + 5 * d[0] + 4 * d[1], y + 5 * d[1] - 4 * d[0]); g.fillStyle = css("ink"); g.fill();
  text(g, "N", x + 22 * d[0], y + 22 * d[1], { align: "center", colour: "ink" });
}

function bar(g, s, x, y) {
  const n = [1, 2, 5, 10, 20, 50].find((m) => m * s > 70) || 100;
  line(g, [[x, y - 4], [x, y], [x + n * s, y], [x + n * s, y - 4]], "ink", 1);
  text(g, `${n} m`, x + n * s + 8, y - 2);
}

function dimension(g, to, d, box) {
  if (!d.planes.length) return;
  const xs = d.planes.flatMap((p) => p.polygon.map((q) => q[0])), ys = d.planes.flatMap((p) => p.polygon.map((q) => q[1]));
  const x0 = Math.min(...xs), x1 = Math.max(...xs), y0 = Math.min(...ys), y1 = Math.max(...ys);
  const a = to([x0, y0]), b = to([x1, y0]), c = to([x1, y1]), low = to([0, box[1]])[1] + 2, side = to([box[2], 0])[0] + 6;
  line(g, [[a[0], low], [b[0], low]], "quiet", 0.6); [a, b].forEach((p) => line(g, [[p[0] - 3, low + 3], [p[0] + 3, low - 3]], "ink", 1));
  text(g, `${(x1 - x0).toFixed(2)} m`, (a[0] + b[0]) / 2, low, { align: "center", halo: true });
  line(g, [[side, b[1]], [side, c[1]]], "quiet", 0.6); [b, c].forEach((p) => line(g, [[side - 3, p[1] + 3], [side + 3, p[1] - 3]], "ink", 1));
  g.save(); g.translate(side, (b[1] + c[1]) / 2); g.rotate(-Math.PI / 2); text(g, `${(y1 - y0).toFixed(2)} m`, 0, 0, { align: "center", halo: true }); g.restore();
}

let at = 0;
function say(i) {
  const c = view && view.cells;
  if (!c || !c.points.length || (i !== null && !c.points[i])) return;
  const fmt = (v) => (c.share ? percent(v) : `${whole(v)} ${c.unit === "lx" ? "lx" : "h"}`);
  if (i === null) {
    const mean = c.points.reduce((s, p) => s + p.v, 0) / c.points.length;
    const none = state.metric !== "hour" && !hourly(view.d) ? " The chosen hour is not shown: this page does not hold the plane's hours." : "";
    reading.textContent = `Mean of the work plane ${fmt(mean)}, from ${fmt(Math.min(...c.points.map((p) => p.v)))} to ${fmt(Math.max(...c.points.map((p) => p.v)))}.` + (state.metric === "hour" ? ` As drawn; half of the values lie within ${percent(c.median)} of the computed ones.` : "") + none;
    return;
  }
  at = i;
  const p = c.points[i];
  reading.textContent = `At x ${p.x.toFixed(2)} m, y ${p.y.toFixed(2)} m: ${fmt(p.v)}.`;
}

const nearest = (list, pos, reach) => {
  let best = -1, far = reach;
  list.forEach((p, i) => { const q = view.to(p), r = Math.hypot(q[0] - pos[0], q[1] - pos[1]); if (r < far) { far = r; best = i; } });
  return best;
};
canvas.addEventListener("pointermove", (e) => { if (view && view.cells) { const i = nearest(view.cells.points.map((p) => [p.x, p.y]), place(canvas, e), view.s); if (i >= 0) say(i); } });
canvas.addEventListener("pointerleave", () => say(null));
canvas.addEventListener("click", (e) => { if (!view) return; const i = nearest(view.d.views.map(handle), place(canvas, e), 28); if (i >= 0) show({ view: i }); });
canvas.addEventListener("keydown", (e) => {
  const c = view && view.cells, move = { ArrowLeft: -1, ArrowRight: 1, ArrowUp: 1, ArrowDown: -1 }[e.key];
  if (!c || !move) return;
  e.preventDefault();
  const p = c.points[at] || c.points[0], up = e.key === "ArrowUp" || e.key === "ArrowDown";
  let best = at, far = 1e9;
  c.points.forEach((q, i) => {
    const a = up ? q.y - p.y : q.x - p.x, b = up ? q.x - p.x : q.y - p.y;
    if (a * move > 0.01 && Math.abs(a) + 3 * Math.abs(b) < far) { far = Math.abs(a) + 3 * Math.abs(b); best = i; }
  });
  say(best);
});
