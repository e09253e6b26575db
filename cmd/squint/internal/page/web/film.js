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
  if (!n) return null;
  const frames = new Map();
  n.record.forEach((r, i) => frames.set(r, i));
  const { rank, points, least, step } = shots, row = Math.ceil(points / 8);
  return {
    shots, numbers: n, frame: (record) => frames.get(record) ?? -1,
    // values fills a list with the frame's values by point.
    values(frame) {
      const code = new Float32Array(points);
      for (let p = 0; p < points; p++) code[p] = n.mean[p] / 128;
      for (let k = 0; k < rank; k++) {
        const w = n.weight[k * shots.frames + frame] / 16 / 127;
        if (w) for (let p = 0, b = k * points; p < points; p++, b++) code[p] += w * n.basis[b];
      }
      for (let p = 0; p < points; p++) {
        code[p] = least * Math.exp(step * code[p]);
        if ((n.lit[frame * row + (p >> 3)] >> (p & 7)) & 1) code[p] += least * Math.exp((step * (n.lit_point[p] + n.lit_frame[frame])) / 128);
      }
      return code;
    },
    // discs are the sun's disc and its images in a frame.
    discs(frame) { return discs(n, frame); },
  };
}

export function discs(n, frame) {
  let first = 0;
  for (let i = 0; i < frame; i++) first += n.discs[i];
  const out = [];
  for (let i = first; i < first + n.discs[frame]; i++) {
    out.push({ x: n.disc_x[i] / 65535, y: n.disc_y[i] / 65535, omega: 1e-9 * Math.exp(n.disc_sr[i] / 2500), lum: Math.exp(n.disc_lum[i] / 2500) });
  }
  return out;
}
