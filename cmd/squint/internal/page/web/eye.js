// What a viewpoint sees: the chosen hour, the sun's paths, the worst hour.
import { year, load, whole, hours, percent, noValue, timeOf, minuteOf, hourMinute, sunAt, standingAt, monthStart } from "./data.js";
import { state } from "./state.js";
import { css, luminanceScale, legend } from "./colour.js";
import { sheet, kept, text, line, place } from "./paper.js";
import { film, discs } from "./film.js";
import { dot } from "./mesh.js";

const canvas = { eye: document.getElementById("c-eye"), path: document.getElementById("c-path"), worst: document.getElementById("c-worst") };
const reading = { eye: document.getElementById("r-eye"), path: document.getElementById("r-path"), worst: document.getElementById("r-worst") };
let looked = null;

const pad = 8; // pixels between a circle and its sheet
const outline = "#4FE3F0"; // of sources of glare and discs, on any colour of the scale
const partAlpha = 0.35, partWidth = 0.5; // of the lines between parts
const ringRadius = 7, discRadius = 1.8; // pixels
const sunny = 100; // lx on a plane that faces the sun, from which its place is shown

// round prepares a square whose circle alone is drawn on, until rim.
function round(c) {
  const s = sheet(c, (w) => w);
  clip(s.g, s.w);
  return s;
}
function clip(g, w) { g.save(); g.beginPath(); g.arc(w / 2, w / 2, w / 2 - pad, 0, 7); g.clip(); }

// onSheet is where a direction stands in the equidistant fisheye, in parts of
// its radius from the middle: x to the right, y down; null behind the eye.
function onSheet(axes, d) {
  const [f, l, u] = axes.map((a) => dot(a, d)), t = Math.acos(Math.max(-1, Math.min(1, f))), r = t / (Math.PI / 2), s = Math.hypot(l, u);
  if (r > 1.0001) return null;
  return s < 1e-9 ? [0, 0] : [(-l / s) * r, (-u / s) * r];
}

export async function eye() {
  const y = await year(state.design), v = y.design.views[state.view];
  if (!v) return;
  const seen = await seenAt(y, v), f = await film(v, 24 * y.n);
  hourPicture(y, v, f, seen);
  paths(y, v, seen);
  await worst(y, v);
  legend(document.getElementById("l-eye"), luminanceScale, "luminance, cd/m\u00b2", [10, 30, 100, 300, 1000, 3000, 10000].map((t) => [t, whole(t)]), ["Rings: the sun's disc and its images. Outlined: above the threshold for sources of glare."]);
}

// seenAt is what stands in each pixel as things stand at the chosen hour; null
// where the page does not say.
export const seenAt = (y, v) => load(v.seen[standingAt(y, state.record)]);

// picture draws a square picture of luminances, between its pixels by logarithm,
// which is to say by steps of the scale.
function picture(g, w, lum, px) {
  const size = Math.round(w - 2 * pad), ratio = 2, n = size * ratio, image = new ImageData(n, n), data = image.data;
  const { table, from, to } = luminanceScale, per = 255 / Math.log(to / from), least = Math.log(from), wide = px + 2;
  // A rim of pixels without a value spares the ends a question.
  const code = new Float32Array(wide * wide).fill(NaN);
  for (let j = 0; j < px; j++) for (let i = 0; i < px; i++) {
    const l = lum[j * px + i];
    if (l > 0) code[(j + 1) * wide + i + 1] = Math.min(255, Math.max(0, (Math.log(l) - least) * per));
  }
  for (let j = 0; j < n; j++) {
    const y = ((j + 0.5) / n) * px + 0.5, y0 = Math.floor(y), b = y - y0, dy = (j + 0.5) / n - 0.5, reach = Math.sqrt(0.25 - dy * dy);
    for (let i = Math.max(0, Math.floor((0.5 - reach) * n)), end = Math.min(n, Math.ceil((0.5 + reach) * n)); i < end; i++) {
      const x = ((i + 0.5) / n) * px + 0.5, x0 = Math.floor(x), a = x - x0, k = y0 * wide + x0;
      const p = code[k], q = code[k + 1], r = code[k + wide], s = code[k + wide + 1];
      let v = (p * (1 - a) + q * a) * (1 - b) + (r * (1 - a) + s * a) * b;
      if (v !== v) { // some have no value
        let sum = 0, weight = 0;
        for (const [c, m] of [[p, (1 - a) * (1 - b)], [q, a * (1 - b)], [r, (1 - a) * b], [s, a * b]]) if (c === c) { sum += c * m; weight += m; }
        if (!weight) continue;
        v = sum / weight;
      }
      const at = 4 * (j * n + i), t = 3 * Math.round(v);
      data[at] = table[t]; data[at + 1] = table[t + 1]; data[at + 2] = table[t + 2]; data[at + 3] = 255;
    }
  }
  const c = new OffscreenCanvas(n, n);
  c.getContext("2d").putImageData(image, 0, 0);
  g.drawImage(c, pad, pad, size, size);
}

function rim(g, w) { g.restore(); g.beginPath(); g.arc(w / 2, w / 2, w / 2 - pad, 0, 7); g.strokeStyle = css("ink"); g.lineWidth = 0.8; g.stroke(); }

// outlines draws the borders between pixels that differ.
function outlines(g, w, px, differ, colour, width, alpha = 1) {
  const q = (w - 2 * pad) / px;
  g.beginPath();
  for (let j = 0; j < px; j++) for (let i = 0; i < px; i++) {
    const p = j * px + i;
    if (i + 1 < px && differ(p, p + 1)) { g.moveTo(pad + (i + 1) * q, pad + j * q); g.lineTo(pad + (i + 1) * q, pad + (j + 1) * q); }
    if (j + 1 < px && differ(p, p + px)) { g.moveTo(pad + i * q, pad + (j + 1) * q); g.lineTo(pad + (i + 1) * q, pad + (j + 1) * q); }
  }
  g.strokeStyle = colour; g.lineWidth = width; g.globalAlpha = alpha; g.stroke(); g.globalAlpha = 1;
}

function partLines(g, w, px, seen) {
  if (!seen) return;
  const id = (p) => (seen.kind[p] & 15) * 70000 + seen.part[p];
  outlines(g, w, px, (a, b) => seen.kind[a] && seen.kind[b] && id(a) !== id(b), "#fff", partWidth, partAlpha);
}

// threshold is what sources of glare exceed by the project's rule: of means,
// each pixel of the equidistant fisheye counts by its solid angle.
function threshold(lum, px, rule) {
  if (!rule.of) return rule.cd_m2;
  let sum = 0, all = 0;
  lum.forEach((l, p) => {
    const t = Math.hypot(((p % px) + 0.5) / px - 0.5, (Math.floor(p / px) + 0.5) / px - 0.5) * Math.PI;
    if (t > Math.PI / 2 || (rule.of === "sight" && t > rule.sight)) return;
    const omega = t > 0 ? Math.sin(t) / t : 1;
    sum += l * omega; all += omega;
  });
  return all > 0 ? (rule.multiple * sum) / all : Infinity;
}

// sources outlines what counts as a source of glare.
function sources(g, w, lum, px, least) {
  outlines(g, w, px, (a, b) => lum[a] > least !== lum[b] > least && lum[a] > 0 && lum[b] > 0, outline, 1.3);
}

function rings(g, w, list) {
  list.forEach((d) => {
    const x = pad + d.x * (w - 2 * pad), y = pad + d.y * (w - 2 * pad);
    g.beginPath(); g.arc(x, y, discRadius, 0, 7); g.fillStyle = "#fff"; g.fill();
    g.beginPath(); g.arc(x, y, ringRadius, 0, 7); g.strokeStyle = outline; g.lineWidth = 1.3; g.stroke();
  });
}

function hourPicture(y, v, f, seen) {
  const { g, w } = round(canvas.eye), frame = f ? f.frame(state.record) : -1, s = y.series[state.view];
  looked = null;
  let t = `${timeOf(y, state.record)}. `;
  if (frame >= 0) {
    const px = f.pixels, lum = new Float32Array(px * px), values = f.values(frame);
    f.numbers.inside.forEach((p, i) => { lum[p] = values[i]; });
    picture(g, w, lum, px);
    partLines(g, w, v.worst_px, seen);
    sources(g, w, lum, px, threshold(lum, px, y.design.sources));
    rings(g, w, discs(f.numbers, frame));
    looked = { lum, px, seen, v, d: y.design, exact: f.exact };
    t += s.dgp[state.record] === noValue ? "Not an hour of use: no DGP is counted." : `DGP ${(s.dgp[state.record] / 1e4).toFixed(3)} \u00b1 ${(s.error[state.record] / 2e3).toFixed(3)}, ${whole(s.ev[state.record])} lx at the eye.`;
    t += ` For display: half of the points lie within ${percent(f.exact.median_error)} of the computed ones, 95 % within ${percent(f.exact.wide_error, 0)}; no verdict comes from it.`;
  } else {
    if (seen) outlines(g, w, v.worst_px, (a, b) => seen.kind[a] && seen.kind[b] && seen.part[a] !== seen.part[b], css("quiet"), 0.5);
    t += y.byRecord[state.record] < 0 ? "It is dark." : f ? "Not an hour of use, and no picture of it was kept." : "This page has no pictures of any hour of this design: it would become too large; see the method.";
  }
  rim(g, w);
  reading.eye.textContent = t;
  canvas.eye.setAttribute("aria-label", `False-colour picture of ${v.subject}: ${t}`);
}

function paths(y, v, seen) {
  const paper = sheet(canvas.path, (w) => w), { w } = paper, R = w / 2 - pad, to = (p) => [w / 2 + p[0] * R, w / 2 + p[1] * R], px = v.worst_px, q = (2 * R) / px;
  const s = y.series[state.view], limit = y.design.asked >= 0 ? y.design.levels[y.design.asked].dgp : 9;
  const bad = [];
  y.moments.record.forEach((r, m) => { if (s && s.dgp[r] !== noValue && s.dgp[r] / 1e4 > limit) bad.push(m); });
  const dots = bad.map((m) => y.moments.direct[m] > sunny && onSheet(v.axes, sunAt(y, m))).filter((p) => p), over = bad.length, front = dots.length;
  kept(canvas.path, paper, [state.design, state.view, standingAt(y, state.record)].join(), (g) => {
    clip(g, w);
    if (seen) for (let p = 0; p < px * px; p++) {
      const kind = seen.kind[p] & 15;
      if (!kind) continue;
      g.fillStyle = css(kind === 2 ? "sky" : "soft");
      g.fillRect(pad + (p % px) * q, pad + Math.floor(p / px) * q, q + 0.3, q + 0.3);
    }
    if (seen) outlines(g, w, px, (a, b) => seen.kind[a] && seen.kind[b] && (seen.kind[a] & 15) * 70000 + seen.part[a] !== (seen.kind[b] & 15) * 70000 + seen.part[b], css("quiet"), 0.5, 0.55);
    // A dot for every hour over the limit, where the sun then stands.
    g.fillStyle = css("not"); g.globalAlpha = 0.55;
    for (const p of dots) { g.beginPath(); g.arc(...to(p), 2.1, 0, 7); g.fill(); }
    g.globalAlpha = 1;
    for (const month of [0, 1, 2, 3, 4, 5, 11]) arc(g, y, v, monthStart[month] + 20, to, { 2: "21 Mar, 23 Sep", 5: "21 Jun", 11: "21 Dec" }[month]);
    rim(g, w);
  });
  const g = paper.g;
  const m = y.byRecord[state.record], now = m >= 0 && onSheet(v.axes, sunAt(y, m));
  if (now && y.moments.direct[m] > 0) { const [x, yy] = to(now); g.beginPath(); g.arc(x, yy, 6, 0, 7); g.fillStyle = css("sun"); g.fill(); g.strokeStyle = css("paper"); g.lineWidth = 1.5; g.stroke(); }
  reading.path.textContent = "Where the sun stands for this eye, by month and hour of the clock; tinted is the sky that it sees." +
    (over ? ` Dots: the sun at ${front < over ? hours(y, front) + " of " : ""}the ${hours(y, over)} hours over the limit${front < over ? "; at the others it is behind, or does not shine" : ""}.` : " No hour is over the limit.");
  canvas.path.setAttribute("aria-label", `The sun's paths as ${v.subject} sees them`);
}

function arc(g, y, v, day, to, name) {
  const times = [];
  for (let h = 0; h < 24 * y.n; h++) { const r = day * 24 * y.n + h, m = y.byRecord[r]; if (m >= 0) times.push([h / y.n, sunAt(y, m), r]); }
  let run = [], best = null;
  const flush = () => { if (run.length > 1) line(g, run, "ink", 0.7); run = []; };
  for (let i = 0; i < times.length; i++) {
    const p = onSheet(v.axes, times[i][1]);
    if (p && times[i][1][2] > 0) {
      const [x, yy] = to(p);
      if (times[i][0] % 1 === 0) { g.beginPath(); g.arc(x, yy, 1.3, 0, 7); g.fillStyle = css("ink"); g.fill(); }
      if ((day === monthStart[5] + 20 || day === monthStart[11] + 20) && times[i][0] % 3 === 0 && Math.hypot(...p) < 0.92) text(g, hourMinute(minuteOf(y, times[i][2])), x, yy - 9, { align: "center", colour: "ink", size: 10, halo: true });
      if (!best || Math.abs(p[0]) < Math.abs(best.p[0])) best = { p, x, y: yy };
    }
    if (i + 1 === times.length) break;
    for (let k = 0; k < 6; k++) {
      const a = times[i][1], b = times[i + 1][1], d = a.map((c, j) => c + ((b[j] - c) * k) / 6), l = Math.hypot(...d), q = d[2] > 0 && onSheet(v.axes, d.map((c) => c / l));
      if (q) run.push(to(q)); else flush();
    }
  }
  flush();
  if (best && name) text(g, name, best.x, best.y + 10, { align: "center", size: 10, halo: true });
}

async function worst(y, v) {
  const n = await load(v.worst_shot), lines = (y.design.worst && y.design.worst[state.view]) || [], paper = sheet(canvas.worst, (w) => w), { w } = paper;
  if (!n) { clip(paper.g, w); rim(paper.g, w); reading.worst.textContent = "No hour in use has daylight."; return; }
  const lum = new Float32Array(n.lum.length), px = v.worst_px;
  for (let i = 0; i < lum.length; i++) lum[i] = n.lum[i] ? 1e-3 * Math.exp(n.lum[i] / 60) : 0;
  kept(canvas.worst, paper, [state.design, state.view].join(), (g) => {
    clip(g, w);
    picture(g, w, lum, px);
    sources(g, w, lum, px, v.worst_threshold);
    rings(g, w, discs(n, 0));
    n.source_x.forEach((x, i) => text(g, String(i + 1), pad + (x / 65535) * (w - 2 * pad) + 9, pad + (n.source_y[i] / 65535) * (w - 2 * pad) - 9, { align: "center", colour: "ink", size: 11, weight: 600, halo: true }));
    rim(g, w);
  });
  reading.worst.textContent = lines.slice(0, 3).join(" ");
  canvas.worst.setAttribute("aria-label", `False-colour picture of the worst hour of ${v.subject}`);
}

function look(fx, fy) {
  if (!looked) return;
  const { lum, px, seen, v, d, exact } = looked, i = Math.floor(fx * px), j = Math.floor(fy * px), l = lum[j * px + i];
  if (!(l > 0)) return;
  const k = Math.floor(fy * v.worst_px) * v.worst_px + Math.floor(fx * v.worst_px), kind = seen ? seen.kind[k] & 15 : 0;
  const what = kind === 2 ? "sky" : kind === 3 ? "ground" : kind === 1 ? d.room.parts[seen.part[k] - 1].name : "";
  reading.eye.textContent = `About ${whole(Number(l.toPrecision(2)))} cd/m\u00b2${what ? ", " + what : ""}. As drawn; half of the points lie within ${percent(exact.median_error)} of the computed ones.`;
}
canvas.eye.addEventListener("pointermove", (e) => { const p = place(canvas.eye, e), w = canvas.eye.clientWidth - 2 * pad; look((p[0] - pad) / w, (p[1] - pad) / w); });
let cursor = [0.5, 0.5];
canvas.eye.addEventListener("keydown", (e) => {
  const by = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] }[e.key];
  if (!by || !looked) return;
  e.preventDefault();
  cursor = cursor.map((c, k) => Math.max(0.01, Math.min(0.99, c + by[k] / looked.px)));
  look(...cursor.map((c) => c + 1e-6)); // not on the border of two pixels
});
