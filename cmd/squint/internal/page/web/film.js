// Pictures of any hour: a mean, patterns with their weights, and the sun's masks.
// The Go package film says what the numbers mean.
import { load } from "./data.js";

const films = new Map();
export function film(shots) {
  if (!films.has(shots)) films.set(shots, develop(shots));
  return films.get(shots);
}

async function develop(shots) {
  const n = shots && (await load(shots.numbers));
  // The page may hold the first patterns alone.
  const steps = [];
  for (const step of (n && shots.steps) || []) {
    const lists = await load(step.numbers);
    if (!lists) break;
    steps.push({ ...step, ...lists });
  }
  if (!steps.length) return null;
  const frames = new Map();
  n.record.forEach((r, i) => frames.set(r, i));
  const { points, least, step } = shots, row = Math.ceil(points / 8);
  return {
    numbers: n, exact: steps[steps.length - 1], frame: (record) => frames.get(record) ?? -1,
    // values fills a list with the frame's values by point.
    values(frame) {
      const code = new Float32Array(points);
      for (let p = 0; p < points; p++) code[p] = n.mean[p] / 128;
      for (const s of steps) for (let k = 0; k * points < s.basis.length; k++) {
        const w = s.weight[k * shots.frames + frame] / 4 / 127;
        if (w) for (let p = 0, b = k * points; p < points; p++, b++) code[p] += w * s.basis[b];
      }
      for (let p = 0; p < points; p++) {
        code[p] = least * Math.exp(step * code[p]);
        if ((n.lit[frame * row + (p >> 3)] >> (p & 7)) & 1) code[p] += least * Math.exp((step * (n.lit_point[p] + n.lit_frame[frame])) / 128);
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
