// The year of a viewpoint: days across, hours of the clock up.
import { year, load, noValue, monthStart, monthNames, monthOf, timeOf, hours, whole } from "./data.js";
import { state, show } from "./state.js";
import { css, dgpScale, luxScale, legend, swatch } from "./colour.js";
import { sheet, kept, text, line, place } from "./paper.js";

const canvas = document.getElementById("c-year"), reading = document.getElementById("r-year"), pick = document.getElementById("pick-series");
let lie = null;

pick.addEventListener("change", () => show({ series: pick.value }));

// values is the chosen series by record; NaN where there is none.
async function values(y) {
  const s = y.series[state.view], n = y.records.used.length, out = new Float64Array(n).fill(NaN);
  if (state.series === "mean") {
    const mean = y.design.planes.length ? (await load(y.design.planes[0].mean)).mean : [];
    y.moments.record.forEach((r, i) => { if (mean[i] !== undefined) out[r] = mean[i]; });
  } else if (s) for (let r = 0; r < n; r++) if (s.dgp[r] !== noValue) out[r] = state.series === "ev" ? s.ev[r] : s.dgp[r] / 1e4;
  return out;
}

export async function drawYear() {
  const y = await year(state.design), v = await values(y), d = y.design;
  if (!d.views.length && !d.planes.length) return;
  const s = y.series[state.view], limit = d.asked >= 0 ? d.levels[d.asked].dgp : NaN;
  let from = 24, to = 0;
  y.moments.record.forEach((r) => { const h = y.clock(r); from = Math.min(from, Math.floor(h)); to = Math.max(to, Math.floor(h) + 1); });
  from = Math.max(0, Math.min(from, Math.floor(d.from_h)) - 1); to = Math.min(25, Math.max(to, Math.ceil(d.to_h)) + 1);
  const states = d.standings.length > 1, left = 38, top = 8, band = states ? 110 : 0, foot = 26;
  const small = canvas.parentElement.clientWidth < 600;
  canvas.style.width = small ? "730px" : "100%";
  const paper = sheet(canvas, (w) => Math.max(230, Math.min(640, w * 0.3)) + band + foot), { w, h } = paper;
  const cw = (w - left - 4) / 365, high = h - top - foot - band, perDay = 24 * y.n, long = 1 / y.n, ch = (high / (to - from)) * long;
  const X = (day) => left + day * cw, Y = (clock) => top + (to - clock) * ch * y.n;
  lie = { y, from, to, left, top, cw, ch, long, X, Y };
  const scale = state.series === "dgp" ? dgpScale : luxScale;
  const over = (r) => s && state.series !== "mean" && s.dgp[r] !== noValue && s.dgp[r] / 1e4 > limit;
  kept(canvas, paper, [state.design, state.view, state.series].join(), (g) => {
    for (let r = 0; r < v.length; r++) {
      if (Number.isNaN(v[r])) continue;
      if (v[r] === 0 && y.byRecord[r] < 0) continue; // in the dark
      g.fillStyle = scale.css(v[r]);
      g.fillRect(X(y.day(r)), Y(y.clock(r) + long), cw + 0.3, ch + 0.3);
    }
    // Outline of the hours over the limit.
    g.beginPath();
    for (let r = 0; r < v.length; r++) {
      if (!over(r)) continue;
      const x = X(y.day(r)), yy = Y(y.clock(r) + long);
      if (!over(r - perDay)) { g.moveTo(x, yy); g.lineTo(x, yy + ch); }
      if (!over(r + perDay)) { g.moveTo(x + cw, yy); g.lineTo(x + cw, yy + ch); }
      if (!over(r + 1) || r % perDay === perDay - 1) { g.moveTo(x, yy); g.lineTo(x + cw, yy); }
      if (!over(r - 1) || r % perDay === 0) { g.moveTo(x, yy + ch); g.lineTo(x + cw, yy + ch); }
    }
    g.strokeStyle = css("ink"); g.lineWidth = 1.1; g.stroke();
    axes(g, from, to, X, Y, h - foot - band);
    for (const key of ["rise", "set"]) {
      let run = [];
      const flush = () => { if (run.length > 1) line(g, run, "ink", 0.8); run = []; };
      for (let day = 0; day < 365; day++) { const m = y.days[key][day]; if (m === noValue || (day && y.days.shift[day] !== y.days.shift[day - 1])) flush(); if (m !== noValue) run.push([X(day + 0.5), Y(m / 60 + y.days.shift[day])]); }
      flush();
    }
    line(g, [[X(0), Y(d.from_h)], [X(365), Y(d.from_h)]], "ink", 0.8, [5, 4]);
    line(g, [[X(0), Y(d.to_h)], [X(365), Y(d.to_h)]], "ink", 0.8, [5, 4]);
    if (states) standingBand(g, y, X, h - band - 4, band, cw, from, to);
  });
  const g = paper.g;
  const cx = X(y.day(state.record) + 0.5), cy = Y(y.clock(state.record) + long / 2);
  for (const [colour, width] of [["paper", 5], ["sun", 2.5]]) { g.beginPath(); g.arc(cx, cy, 8, 0, 7); g.strokeStyle = css(colour); g.lineWidth = width; g.stroke(); }
  canvas.setAttribute("aria-label", `The year of ${d.views[state.view] ? d.views[state.view].subject : "the work plane"}: ${pick.selectedOptions[0].text}. Arrow keys choose day and hour.`);
  const el = document.getElementById("l-year");
  const notes = states ? d.standings.slice(0, 8).map((t, i) => [swatch(tone(i, d.standings.length)), t || "as drawn"]) : [];
  if (state.series === "dgp") legend(el, dgpScale, "daylight glare probability", [0.2, 0.3, 0.35, 0.4, 0.45, 0.5, 0.6].map((t) => [t, String(t)]), notes, limit);
  else legend(el, luxScale, state.series === "ev" ? "illuminance at the eye, lx" : "mean of the first work plane, lx", [30, 100, 300, 1000, 3000, 10000].map((t) => [t, whole(t)]), notes);
  reading.textContent = words(state.record);
  document.getElementById("causes").textContent = causes(y, d);
  table(y, d);
}

function axes(g, from, to, X, Y, low) {
  for (let h = Math.ceil(from / 4) * 4; h <= to; h += 4) { line(g, [[X(0) - 4, Y(h)], [X(0), Y(h)]], "quiet", 0.8); text(g, `${h} h`, X(0) - 7, Y(h), { align: "right", size: 11 }); }
  monthStart.forEach((d, m) => { line(g, [[X(d), low], [X(d), low + 4]], "quiet", 0.8); text(g, monthNames[m].slice(0, 3), X(d + 15), low + 14 , { align: "center", size: 11 }); });
  line(g, [[X(0), low], [X(365), low]], "hair", 1);
}

// tone is a step from paper to ink for a state of what moves.
function tone(i, n) {
  const part = n > 1 ? i / (n - 1) : 0, [a, b] = ["hair", "ink"].map((name) => [1, 3, 5].map((k) => parseInt(css(name).substr(k, 2), 16)));
  return `rgb(${a.map((v, k) => Math.round(v + (b[k] - v) * part * 0.85)).join(" ")})`;
}

// standingBand shows below the year how what moves stands, on the same days.
function standingBand(g, y, X, top, high, cw, from, to) {
  const ch = high / (to - from), names = y.design.standings, tones = names.map((_, i) => tone(i, names.length));
  for (let r = 0; r < y.records.standing.length; r++) {
    const k = y.records.standing[r];
    if (k === 255) continue;
    g.fillStyle = tones[k];
    g.fillRect(X(y.day(r)), top + (to - y.clock(r) - 1 / y.n) * ch, cw + 0.3, ch / y.n + 0.3);
  }
}

function words(r) {
  const { y } = lie, d = y.design, s = y.series[state.view], m = y.byRecord[r];
  let t = `${timeOf(y, r)}: `;
  if (m < 0) return t + "dark.";
  if (s && s.dgp[r] !== noValue) {
    t += `DGP ${(s.dgp[r] / 1e4).toFixed(3)} \u00b1 ${(s.error[r] / 2e3).toFixed(3)}, ${whole(s.ev[r])} lx at the eye`;
    const c = d.views[state.view].causes[s.cause[r]];
    if (c) t += `, mostly by ${c}`;
    t += ". ";
  } else t += "not in use. ";
  t += `Sun ${whole(y.moments.direct[m])} lx on a plane that faces it, sky ${whole(y.moments.sky[m])} lx on the level.`;
  const k = y.records.standing[r];
  if (d.standings.length > 1 && k !== 255 && d.standings[k]) t += ` With ${d.standings[k]}.`;
  return t;
}

// causes counts what carries the hours over the limit, the commonest first.
function causes(y, d) {
  const s = y.series[state.view], n = new Map(), v = d.views[state.view];
  let all = 0;
  if (!v || !s || d.asked < 0) return "";
  for (let r = 0; r < s.dgp.length; r++) if (s.dgp[r] !== noValue && s.dgp[r] / 1e4 > d.levels[d.asked].dgp) { all++; n.set(s.cause[r], (n.get(s.cause[r]) || 0) + 1); }
  if (!all) return "No hour in use is over the limit.";
  const list = [...n].sort((a, b) => b[1] - a[1]).slice(0, 4).map(([c, k]) => `${hours(y, k)} by ${v.causes[c] || "the brightness of the whole view"}`);
  return `Of the ${hours(y, all)} hours over the limit: ${list.join("; ")}${n.size > 4 ? "; the rest by others" : ""}.`;
}

let filled = "";
function table(y, d) {
  const key = state.design + "/" + state.view + state.series;
  if (filled === key || d.asked < 0 || !d.views.length) return;
  filled = key;
  const s = y.series[state.view], limit = d.levels[d.asked].dgp, n = {}, columns = [];
  for (let r = 0; r < s.dgp.length; r++) if (s.dgp[r] !== noValue && s.dgp[r] / 1e4 > limit) { const h = Math.floor(y.clock(r)), m = monthOf(y.day(r)); n[m + "/" + h] = (n[m + "/" + h] || 0) + 1; }
  for (let h = Math.floor(d.from_h); h < Math.ceil(d.to_h); h++) columns.push(h);
  const t = document.getElementById("t-year"), cell = (tag, text, c) => { const e = document.createElement(tag); e.textContent = text; if (c) e.className = c; return e; };
  const row = (...cells) => { const e = document.createElement("tr"); e.append(...cells); return e; };
  const col = (e) => { e.scope = "col"; return e; };
  t.tHead.replaceChildren(row(col(cell("th", "Month")), ...columns.map((h) => col(cell("th", `${h} h`, "n")))));
  t.tBodies[0].replaceChildren(...monthNames.map((name, m) => { const th = cell("th", name); th.scope = "row"; return row(th, ...columns.map((h) => cell("td", n[m + "/" + h] ? hours(y, n[m + "/" + h]) : "", "n"))); }));
}

// recordAt finds the record under a place of the chart.
function recordAt(pos) {
  const { y } = lie, day = Math.floor((pos[0] - lie.left) / lie.cw), clock = lie.to - (pos[1] - lie.top) / lie.ch / y.n;
  if (day < 0 || day > 364 || clock < lie.from || clock >= lie.to) return -1;
  const step = Math.floor((clock - y.days.shift[day]) * y.n);
  return step < 0 || step >= 24 * y.n ? -1 : day * 24 * y.n + step;
}
canvas.addEventListener("pointermove", (e) => { const r = lie ? recordAt(place(canvas, e)) : -1; if (r >= 0) reading.textContent = words(r); });
canvas.addEventListener("pointerleave", () => { if (lie) reading.textContent = words(state.record); });
canvas.addEventListener("click", (e) => { const r = lie ? recordAt(place(canvas, e)) : -1; if (r >= 0) show({ record: r }); });
canvas.addEventListener("keydown", (e) => {
  if (!lie) return;
  const day = 24 * lie.y.n, by = { ArrowLeft: -day, ArrowRight: day, ArrowUp: 1, ArrowDown: -1, PageUp: day * 7, PageDown: -day * 7 }[e.key];
  if (!by) return;
  e.preventDefault();
  show({ record: Math.max(0, Math.min(365 * day - 1, state.record + by)) });
});

// pointOf is where a record stands on the canvas, for tests.
export const pointOf = (r) => [lie.X(lie.y.day(r) + 0.5), lie.Y(lie.y.clock(r) + lie.long / 2)];
