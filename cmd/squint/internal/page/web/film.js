// Pictures of any hour: a mean, patterns with their weights, and the sun's masks.
// The Go package film says what the numbers mean.
import { load, holds } from "./data.js";

// film is that of a view or a work plane: the small one where the page has no
// other; null for none.
const films = new Map();
export function film(of, perDay) {
  if (!films.has(of)) films.set(of, develop(held(of), perDay));
  return films.get(of);
}

const held = (of) => (holds(of.shots.numbers) || !of.small ? of.shots : of.small);

// best is the finest step that the page holds, of how many pixels; null for none.
export function best(of) {
  const shots = held(of), step = holds(shots.numbers) ? (shots.steps || []).filter((s) => holds(s.numbers)).pop() : null;
  return step ? { ...step, pixels: shots.pixels, small: shots === of.small } : null;
}

// masks puts together what the sun lights in each frame; the Go package page
// says how they are packed.
function masks(n, shots, perDay) {
  let sum = 0;
  n.record = n.rise.map((r) => (sum += r));
  const row = Math.ceil(shots.points / 8), out = new Uint8Array(row * shots.frames), order = [...n.record.keys()];
  order.sort((a, b) => (n.record[a] % perDay) - (n.record[b] % perDay) || n.record[a] - n.record[b]);
  const mask = new Uint8Array(row);
  let at = 0;
  order.forEach((frame, k) => {
    if (!n.sunny[k]) return;
    for (let i = 0; i < row; i++) mask[i] ^= n.lit[at++];
    out.set(mask, frame * row);
  });
  return out;
}

async function develop(shots, perDay) {
  const n = shots && (await load(shots.numbers));
  // The page may hold the first patterns alone.
  const steps = [];
  for (const step of (n && shots.steps) || []) {
    const lists = await load(step.numbers);
    if (!lists) break;
    steps.push({ ...step, ...lists });
  }
  if (!steps.length) return null;
  const lit = masks(n, shots, perDay), frames = new Map();
  n.record.forEach((r, i) => frames.set(r, i));
  const { points, least, step } = shots, row = Math.ceil(points / 8), fine = 2 * shots.grain;
  return {
    numbers: n, pixels: shots.pixels, exact: steps[steps.length - 1], frame: (record) => frames.get(record) ?? -1,
    // values fills a list with the frame's values by point.
    values(frame) {
      const code = new Float32Array(points);
      for (let p = 0; p < points; p++) code[p] = n.mean[p] / fine;
      for (const s of steps) for (let k = 0; k * points < s.basis.length; k++) {
        const w = s.weight[k * shots.frames + frame] / shots.grain / 127;
        if (w) for (let p = 0, b = k * points; p < points; p++, b++) code[p] += w * s.basis[b];
      }
      for (let p = 0; p < points; p++) {
        code[p] = least * Math.exp(step * code[p]);
        if ((lit[frame * row + (p >> 3)] >> (p & 7)) & 1) code[p] += least * Math.exp((step * (n.lit_point[p] + n.lit_frame[frame])) / fine);
      }
      return code;
    },
  };
}

// discs are where the sun's disc and its images stand in a frame.
export function discs(n, frame) {
  let first = 0;
  for (let i = 0; i < frame; i++) first += n.discs[i];
  const out = [];
  for (let i = first; i < first + n.discs[frame]; i++) {
    out.push({ x: n.disc_x[i] / 255, y: n.disc_y[i] / 255 });
  }
  return out;
}
