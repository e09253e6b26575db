// The room's triangles: edges, sections, and where the sun falls.
import { designs, load, standingAt } from "./data.js";

// room is the geometry as it stands at a record of a year; standings of which
// the meshes are alike share it.
const rooms = new Map();
export function room(y, record) {
  const r = y.design.room, standing = standingAt(y, record), stands = r.stands[standing] || [], key = designs.indexOf(y.design) + "/" + stands;
  if (!rooms.has(key)) rooms.set(key, read(r, stands.map((k) => r.systems[k])));
  return rooms.get(key);
}

// Choices of the drawing, for display only.
const crease = 0.87; // cosine of the fold from which an edge is drawn: 30 degrees
const clear = 0.3; // a surface that lets more straight through does not stop the sun
const polished = 0.3; // one that mirrors more throws it on
const leaf = 6; // triangles in a box of the tree
const cell = 0.15; // metres between the rays through an opening
const low = 0.01; // sine of the sun's least height, and to an opening's plane
const lift = 0.006; // metres of a patch above its surface

async function read(r, systems) {
  const parts = await Promise.all([r.fabric, ...systems].map(async (m) => unfold(m, await load(m.numbers))));
  const n = parts.reduce((sum, p) => sum + p.n, 0);
  const all = { room: r, n, fabric: parts[0].n, corner: new Float32Array(9 * n), finish: new Uint16Array(n), part: new Uint16Array(n) };
  parts.reduce((at, p) => {
    all.corner.set(p.corner, 9 * at); all.finish.set(p.finish, at); all.part.set(p.part, at);
    return at + p.n;
  }, 0);
  all.tree = tree(all.corner, n);
  all.edges = edges(all);
  return all;
}

function unfold(m, lists) {
  if (!lists) return { n: 0, corner: [], finish: [], part: [] };
  const corner = new Float32Array(lists.corner.length);
  for (let i = 0; i < corner.length; i++) { const k = i % 3; corner[i] = m.min[k] + (lists.corner[i] / 65535) * (m.max[k] - m.min[k]); }
  return { n: lists.finish.length, corner, finish: lists.finish, part: lists.part };
}

export const sub = (a, b) => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
export const add = (a, b) => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
export const scale = (a, s) => [a[0] * s, a[1] * s, a[2] * s];
export const dot = (a, b) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
export const cross = (a, b) => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
export const unit = (a) => scale(a, 1 / (Math.hypot(...a) || 1));
const corner = (c, i, k) => [c[9 * i + 3 * k], c[9 * i + 3 * k + 1], c[9 * i + 3 * k + 2]];

export function normal(m, i) {
  const a = corner(m.corner, i, 0);
  return unit(cross(sub(corner(m.corner, i, 1), a), sub(corner(m.corner, i, 2), a)));
}

// edges are the lines of a drawing: where surfaces end or fold by 30 degrees or
// more, in or between triangles that share two corners.
function edges(m) {
  const key = (p) => p.map((x) => Math.round(x * 500)).join();
  const found = new Map();
  for (let i = 0; i < m.n; i++) {
    const n = normal(m, i);
    for (let k = 0; k < 3; k++) {
      const a = corner(m.corner, i, k), b = corner(m.corner, i, (k + 1) % 3), ka = key(a), kb = key(b);
      if (ka === kb) continue;
      const id = ka < kb ? ka + "|" + kb : kb + "|" + ka;
      const e = found.get(id);
      if (!e) found.set(id, { a, b, n, keep: true, i });
      else e.keep = Math.abs(dot(e.n, n)) < crease;
    }
  }
  return [...found.values()].filter((e) => e.keep);
}

// section cuts the room at a height: segments of the plan.
export function section(m, z) {
  const out = [];
  for (let i = 0; i < m.n; i++) {
    const p = [];
    for (let k = 0; k < 3; k++) {
      const a = corner(m.corner, i, k), b = corner(m.corner, i, (k + 1) % 3);
      if (a[2] < z !== b[2] < z) { const t = (z - a[2]) / (b[2] - a[2]); p.push([a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]); }
    }
    if (p.length === 2) out.push(p);
  }
  return out;
}

// tree bounds groups of triangles by boxes, halved along the longest side.
function tree(c, n) {
  const index = Uint32Array.from({ length: n }, (_, i) => i), centre = (i, k) => c[9 * i + k] + c[9 * i + 3 + k] + c[9 * i + 6 + k];
  const build = (from, to) => {
    const lo = [1e9, 1e9, 1e9], hi = [-1e9, -1e9, -1e9];
    for (let j = from; j < to; j++) for (let q = 0; q < 9; q++) { const v = c[9 * index[j] + q], k = q % 3; if (v < lo[k]) lo[k] = v; if (v > hi[k]) hi[k] = v; }
    const node = { lo, hi, from, to };
    if (to - from > leaf) {
      const size = sub(hi, lo), k = size.indexOf(Math.max(...size)), mid = (from + to) >> 1;
      index.subarray(from, to).sort((a, b) => centre(a, k) - centre(b, k));
      node.kids = [build(from, mid), build(mid, to)];
    }
    return node;
  };
  return { root: n ? build(0, n) : null, index };
}

function meets(node, o, inv, far) {
  let t0 = 0, t1 = far;
  for (let k = 0; k < 3; k++) {
    let a = (node.lo[k] - 1e-5 - o[k]) * inv[k], b = (node.hi[k] + 1e-5 - o[k]) * inv[k];
    if (a > b) [a, b] = [b, a];
    if (a > t0) t0 = a;
    if (b < t1) t1 = b;
    if (t0 > t1) return false;
  }
  return true;
}

// hit is the nearest triangle from o along d that does not let the sun through.
function hit(m, o, d, near = 1e-3) {
  const inv = d.map((x) => 1 / (x || 1e-12)), c = m.corner;
  let best = { t: 1e9, i: -1 };
  const walk = (node) => {
    if (!node || !meets(node, o, inv, best.t)) return;
    if (node.kids) { node.kids.forEach(walk); return; }
    for (let j = node.from; j < node.to; j++) {
      const i = m.tree.index[j];
      if (m.room.finishes[m.finish[i]].through > clear) continue;
      const a = corner(c, i, 0), e1 = sub(corner(c, i, 1), a), e2 = sub(corner(c, i, 2), a), p = cross(d, e2), det = dot(e1, p);
      if (Math.abs(det) < 1e-12) continue;
      const s = sub(o, a), u = dot(s, p) / det;
      if (u < -1e-6 || u > 1 + 1e-6) continue;
      const q = cross(s, e1), v = dot(d, q) / det;
      if (v < -1e-6 || u + v > 1 + 1e-6) continue;
      const t = dot(e2, q) / det;
      if (t > near && t < best.t) best = { t, i };
    }
  };
  walk(m.tree.root);
  return best.i < 0 ? null : best;
}

const bounces = 3; // mirrors in a row that are followed

// beams follow the sun through the openings: patches are parallelograms where
// it falls, paths the ways of a few rays. For display; the study has its own.
export function beams(m, sun, across = 20) {
  const patches = [], paths = [];
  if (sun[2] <= low) return { patches, paths };
  const d = scale(sun, -1);
  for (const o of m.room.openings) {
    const facing = dot(sun, o.outward);
    const [a, b, , e] = o.corners, w = sub(b, a), h = sub(e, a);
    const nu = Math.max(2, Math.min(40, Math.round(Math.hypot(...w) / cell))), nv = Math.max(2, Math.min(across, Math.round(Math.hypot(...h) / cell)));
    if (facing <= low) continue;
    for (let u = 0; u < nu; u++) for (let v = 0; v < nv; v++) {
      let p = add(a, add(scale(w, (u + 0.5) / nu), scale(h, (v + 0.5) / nv)));
      // What stands outdoors may hide the sun, or throw it on.
      if (hit(m, add(p, scale(sun, 0.02)), sun)) continue;
      follow(m, p, d, scale(w, 1 / nu), scale(h, 1 / nv), (u % 5 === 2 || nu < 5) && (v % 5 === 2 || nv < 5), patches, paths, 0);
    }
  }
  // Mirrors outdoors see the sun without an opening.
  for (let i = m.fabric; i < m.n; i++) {
    if (m.room.finishes[m.finish[i]].mirror < polished) continue;
    const n = normal(m, i), c = [0, 1, 2].map((k) => corner(m.corner, i, k)), p = scale(add(c[0], add(c[1], c[2])), 1 / 3);
    if (Math.abs(dot(n, sun)) < 0.02 || hit(m, add(p, scale(sun, 0.01)), sun)) continue;
    const q = add(p, scale(sun, 0.005)), h = hit(m, q, d);
    if (!h || h.i !== i) continue;
    const r = mirrored(d, n), start = add(p, scale(r, 0.01)), g = hit(m, start, r);
    if (g) paths.push({ points: [add(p, scale(sun, 1.5)), p, add(start, scale(r, g.t))], thrown: true });
  }
  return { patches, paths };
}

const mirrored = (d, n) => sub(d, scale(n, 2 * dot(d, n)));

function follow(m, p, d, eu, ev, drawn, patches, paths, thrown) {
  const points = [add(p, scale(d, -1.2)), p];
  for (let k = 0; k <= bounces; k++) {
    const h = hit(m, p, d);
    if (!h) break;
    const at = add(p, scale(d, h.t)), n = normal(m, h.i), along = dot(d, n);
    points.push(at);
    if (Math.abs(along) < 1e-3) break;
    const drop = (e) => sub(e, scale(d, dot(e, n) / along));
    if (m.room.finishes[m.finish[h.i]].mirror > polished && k < bounces) {
      eu = mirrored(eu, n); ev = mirrored(ev, n); d = mirrored(d, n); p = at; thrown++;
      continue;
    }
    const off = scale(n, along < 0 ? lift : -lift), x = scale(drop(eu), 0.5), y = scale(drop(ev), 0.5);
    patches.push({ at: add(at, off), n: along < 0 ? n : scale(n, -1), thrown: thrown > 0, quad: [add(add(at, off), add(x, y)), add(add(at, off), sub(x, y)), sub(add(at, off), add(x, y)), add(add(at, off), sub(y, x))] });
    break;
  }
  if (drawn && points.length > 2) paths.push({ points, thrown: thrown > 0 });
}
