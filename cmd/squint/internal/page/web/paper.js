import { css } from "./colour.js";

// sheet prepares a canvas for drawing in CSS pixels, high by its width.
export function sheet(canvas, high) {
  const w = canvas.clientWidth || 600, h = Math.round(high(w)), ratio = Math.max(2, Math.min(3, window.devicePixelRatio || 1));
  if (canvas.width !== Math.round(w * ratio) || canvas.height !== Math.round(h * ratio)) { canvas.width = Math.round(w * ratio); canvas.height = Math.round(h * ratio); }
  canvas.style.aspectRatio = `${w}/${h}`;
  const g = canvas.getContext("2d");
  g.setTransform(ratio, 0, 0, ratio, 0, 0);
  g.clearRect(0, 0, w, h);
  g.lineJoin = "round"; g.lineCap = "butt";
  return { g, w, h };
}

// kept draws what does not change with the hour once for each key, and lays it
// on the sheet; sheets are those of sheet().
const drawings = new Map();
export function kept(canvas, s, key, draw) {
  const all = `${key}/${canvas.width}x${canvas.height}/${css("paper")}`, old = drawings.get(canvas.id);
  let c = old && old.all === all ? old.c : null;
  if (!c) {
    c = document.createElement("canvas");
    c.width = canvas.width; c.height = canvas.height;
    const g = c.getContext("2d");
    g.setTransform(s.g.getTransform()); g.lineJoin = "round";
    draw(g);
    drawings.set(canvas.id, { all, c });
  }
  s.g.save(); s.g.setTransform(1, 0, 0, 1, 0, 0); s.g.drawImage(c, 0, 0); s.g.restore();
}

// larger is how much larger the page's type is than that of a small screen.
const larger = () => parseFloat(getComputedStyle(document.documentElement).fontSize) / 15.5;

export function text(g, s, x, y, { align = "left", colour = "quiet", size = 12, weight = 400, halo = false } = {}) {
  g.font = `${weight} ${size * larger()}px ${css("sans")}`; g.textAlign = align; g.textBaseline = "middle";
  if (halo) { g.strokeStyle = css("paper"); g.lineWidth = 3.5; g.strokeText(s, x, y); }
  g.fillStyle = css(colour) || colour; g.fillText(s, x, y);
}

export function line(g, points, colour, width, dash = []) {
  g.beginPath();
  points.forEach(([x, y], i) => (i ? g.lineTo(x, y) : g.moveTo(x, y)));
  g.strokeStyle = css(colour) || colour; g.lineWidth = width; g.setLineDash(dash); g.stroke(); g.setLineDash([]);
}

export const place = (canvas, e) => { const r = canvas.getBoundingClientRect(); return [e.clientX - r.left, e.clientY - r.top]; };
