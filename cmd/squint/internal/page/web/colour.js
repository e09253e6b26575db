import { page } from "./data.js";

const maps = {};
for (const [name, text] of Object.entries(page.maps)) {
  const table = new Uint8Array(768);
  for (let i = 0; i < 768; i++) table[i] = parseInt(text.substr(2 * i, 2), 16);
  maps[name] = table;
}

// Scale turns values into colours: linear, or by logarithm.
export class Scale {
  constructor(map, from, to, log) { this.table = maps[map]; this.from = from; this.to = to; this.log = log; }
  part(v) {
    const t = this.log ? Math.log(Math.max(v, 1e-9) / this.from) / Math.log(this.to / this.from) : (v - this.from) / (this.to - this.from);
    return Math.min(1, Math.max(0, t));
  }
  rgb(v) { const i = 3 * Math.round(255 * this.part(v)); return [this.table[i], this.table[i + 1], this.table[i + 2]]; }
  css(v) { return `rgb(${this.rgb(v).join(" ")})`; }
}

// The same quantity has the same map everywhere.
export const dgpScale = new Scale("viridis", 0.15, 0.6, false);
export const luxScale = new Scale("cividis", 30, 30000, true);
export const shareScale = (most) => new Scale("cividis", 0, most, false);

// luminanceScale shows pictures from a dim corner to the bright sky.
export const luminanceScale = new Scale("inferno", 5, 20000, true);

// css reads the sheet's own colours, which follow light, dark and print.
const known = new Map();
export function css(name) {
  if (!known.has(name)) known.set(name, getComputedStyle(document.documentElement).getPropertyValue("--" + name).trim());
  return known.get(name);
}
for (const change of ["(prefers-color-scheme: dark)", "print"]) matchMedia(change).addEventListener("change", () => known.clear());

// legend draws a scale with ticks into an element.
export function legend(element, scale, unit, ticks, notes = [], mark) {
  element.replaceChildren();
  const c = document.createElement("canvas");
  c.setAttribute("role", "img");
  c.setAttribute("aria-label", `Scale in ${unit} from ${scale.from} to ${scale.to}`);
  element.append(c);
  const ratio = Math.max(2, window.devicePixelRatio || 1), w = 300, h = 38;
  c.width = w * ratio; c.height = h * ratio; c.style.aspectRatio = `${w}/${h}`;
  const g = c.getContext("2d");
  g.scale(ratio, ratio);
  for (let x = 0; x < 270; x++) {
    const t = x / 269, v = scale.log ? scale.from * (scale.to / scale.from) ** t : scale.from + t * (scale.to - scale.from);
    g.fillStyle = scale.css(v); g.fillRect(10 + x, 0, 1.5, 12);
  }
  g.font = `11px ${css("sans")}`; g.fillStyle = css("quiet"); g.strokeStyle = css("quiet"); g.textAlign = "center"; g.lineWidth = 1;
  for (const [v, text] of ticks) {
    const x = 10 + 270 * scale.part(v);
    g.beginPath(); g.moveTo(x, 12); g.lineTo(x, 16); g.stroke();
    g.textAlign = x < 20 ? "left" : x > 265 ? "right" : "center";
    g.fillText(text, x < 20 ? x - 8 : x > 265 ? x + 8 : x, 28);
  }
  if (mark !== undefined) {
    const x = 10 + 270 * scale.part(mark);
    g.strokeStyle = css("ink"); g.lineWidth = 2; g.beginPath(); g.moveTo(x, 0); g.lineTo(x, 17); g.stroke();
  }
  const label = document.createElement("span"); label.textContent = unit; element.append(label);
  for (const n of notes) { const s = document.createElement("span"); s.append(...[].concat(n)); element.append(s); }
}

export function swatch(colour) { const i = document.createElement("i"); i.style.background = colour; return i; }
