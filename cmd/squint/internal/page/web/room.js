// The room in three dimensions, drawn on demand.
import { designs, year, sunAt, monthStart, timeOf, standingAt, percent, whole } from "./data.js";
import { state } from "./state.js";
import { css, luminanceScale, luxScale, legend } from "./colour.js";
import { room, beams, normal, add, sub, scale, cross, unit, dot } from "./mesh.js";
import { extent, planeLight } from "./plan.js";
import { film } from "./film.js";
import { seenAt } from "./eye.js";

const canvas = document.getElementById("c-room"), reading = document.getElementById("r-room"), surface = document.getElementById("pick-surface"), cut = document.getElementById("pick-cut");
const gl = canvas.getContext("webgl2", { antialias: true, preserveDrawingBuffer: true, alpha: false });

const vertex = `#version 300 es
in vec3 at; in vec4 colour; in float part; uniform mat4 see; out vec3 p; out vec4 c; flat out float id;
void main(){ p=at; c=colour; id=part; gl_Position=see*vec4(at,1.); }`;
// Surfaces are shaded a little by their slope, from no light in particular.
const fragment = `#version 300 es
precision highp float; in vec3 p; in vec4 c; flat in float id; out vec4 o;
uniform float top; uniform int mode; uniform vec3 eye, front, left, up, paper; uniform sampler2D seen; uniform sampler2D parts, lux; uniform float dim, span, from, reach;
void main(){
  if(p.z>top) discard;
  if(mode==2){ o=c; return; }
  vec3 n=normalize(cross(dFdx(p),dFdy(p)));
  float s=.84+.15*abs(n.z)+.07*abs(n.x);
  o=vec4(c.rgb*s,c.a);
  if(mode==1||mode==3){
    float rho=fract(id)*2.;
    vec3 d=normalize(p-eye); float f=dot(d,front), a=acos(clamp(f,-1.,1.))/1.5707963; vec2 q=vec2(-dot(d,left),-dot(d,up));
    vec2 uv=a*normalize(q+1e-9)*.5+.5;
    if(a<1.) for(int k=0;k<9;k++){ // a part's edge may lie in the next pixel
      vec2 w=uv+vec2(k%3-1,k/3-1)/float(textureSize(parts,0).x);
      vec4 t=floor(texture(parts,w)*255.+.5), v=texture(seen,mode==3?w:uv);
      if(v.a<.5 || abs(t.r+256.*t.g-floor(id)-1.)>.5 && (mode==3 || c.a>.5 || t.b==0.)) continue;
      if(mode==1){ o=vec4(v.rgb,1.); return; }
      if(rho>0.){ // matte
        float e=3.14159265*dim*exp((v.r*255.*256.+v.g*255.)/65535.*span)/rho;
        o=vec4(texture(lux,vec2(clamp(log(e/from)/reach,0.,1.)*255./256.+.5/256.,.5)).rgb,1.); return;
      }
    }
    o=vec4(mix(paper,c.rgb*s,.35),c.a);
  }
}`;

let program, at = {}, camera = null, buffers = {}, last = {};

if (gl) {
  const make = (kind, source) => { const s = gl.createShader(kind); gl.shaderSource(s, source); gl.compileShader(s); if (!gl.getShaderParameter(s, gl.COMPILE_STATUS)) throw new Error(gl.getShaderInfoLog(s)); return s; };
  program = gl.createProgram();
  gl.attachShader(program, make(gl.VERTEX_SHADER, vertex)); gl.attachShader(program, make(gl.FRAGMENT_SHADER, fragment));
  gl.linkProgram(program); gl.useProgram(program);
  for (const u of ["see", "top", "mode", "eye", "front", "left", "up", "paper", "seen", "parts", "lux", "dim", "span", "from", "reach"]) at[u] = gl.getUniformLocation(program, u);
  for (const a of ["at", "colour", "part"]) { at[a] = gl.getAttribLocation(program, a); gl.enableVertexAttribArray(at[a]); }
}

// A batch is vertices of 5 numbers: place, colour in a byte each, and the part's
// number with half the reflectance of a matte finish behind the point.
class Batch {
  constructor() { this.list = []; }
  put(p, c, part = -9) { this.list.push([p, c, part]); }
  done(key) {
    const n = this.list.length, data = new ArrayBuffer(20 * n), f = new Float32Array(data), u = new Uint8Array(data);
    this.list.forEach(([p, c, part], i) => { f.set(p, 5 * i); u.set(c, 20 * i + 12); f[5 * i + 4] = part; });
    const old = buffers[key];
    const b = old ? old.b : gl.createBuffer();
    gl.bindBuffer(gl.ARRAY_BUFFER, b); gl.bufferData(gl.ARRAY_BUFFER, data, gl.DYNAMIC_DRAW);
    buffers[key] = { b, n };
  }
}

function paint(key, kind, mode) {
  const { b, n } = buffers[key] || {};
  if (!n) return;
  gl.bindBuffer(gl.ARRAY_BUFFER, b);
  gl.vertexAttribPointer(at.at, 3, gl.FLOAT, false, 20, 0); gl.vertexAttribPointer(at.colour, 4, gl.UNSIGNED_BYTE, true, 20, 12); gl.vertexAttribPointer(at.part, 1, gl.FLOAT, false, 20, 16);
  gl.uniform1i(at.mode, mode);
  gl.drawArrays(kind, 0, n);
}

const rgb = (name) => { const t = css(name).replace("#", ""), full = t.length === 3 ? [...t].map((c) => c + c).join("") : t; return [0, 2, 4].map((i) => parseInt(full.substr(i, 2), 16)); };

// How finishes are drawn: clear, mirrored and veiled ones in colours of their
// own, from these shares on; the others grey by the root of their reflectance.
const clear = 0.3, polished = 0.3, veiled = 0.02;
const glassColour = [150, 185, 200, 60], mirrorColour = [150, 175, 205, 255], clothColour = [214, 205, 188, 190];
const sunny = 500; // lx on a plane that faces the sun, from which its way is drawn

function finishColour(f) {
  if (f.through > clear) return glassColour;
  if (f.mirror > polished) return mirrorColour;
  if (f.veil > veiled) return clothColour;
  const l = 255 * (0.5 + 0.47 * Math.sqrt(f.diffuse));
  return [l, l * 0.985, l * 0.955, 255];
}

function geometry(m) {
  const solid = new Batch(), glass = new Batch(), lines = new Batch(), ink = [...rgb("ink"), 255];
  const c = (i, k) => [m.corner[9 * i + 3 * k], m.corner[9 * i + 3 * k + 1], m.corner[9 * i + 3 * k + 2]];
  for (let i = 0; i < m.n; i++) {
    const colour = finishColour(m.room.finishes[m.finish[i]]), b = colour[3] < 255 ? glass : solid;
    for (let k = 0; k < 3; k++) b.put(c(i, k), colour, m.part[i] + m.room.finishes[m.finish[i]].matte / 2);
  }
  const g = m.room.ground, x0 = m.room.min[0] - 6, y0 = m.room.min[1] - 6, x1 = m.room.max[0] + 6, y1 = m.room.max[1] + 6, soft = [...rgb("soft"), 255];
  for (const p of [[x0, y0], [x1, y0], [x1, y1], [x0, y0], [x1, y1], [x0, y1]]) solid.put([...p, g - 0.02], soft, -9);
  for (const e of m.edges) { lines.put(e.a, [ink[0], ink[1], ink[2], 150]); lines.put(e.b, [ink[0], ink[1], ink[2], 150]); }
  solid.done("solid"); glass.done("glass"); lines.done("lines");
}

function marks(m, y) {
  const lines = new Batch(), over = new Batch(), sun = [...rgb("sun"), 255], quiet = [...rgb("quiet"), 200], ink = [...rgb("ink"), 255];
  y.design.views.forEach((v, i) => {
    if (camera && camera.eye && i === state.view) return; // it looks out of itself
    const [f, l, u] = v.axes, e = v.position, colour = i === state.view ? sun : ink, size = i === state.view ? 0.55 : 0.35;
    const tip = [[-0.5, 0.35], [0.5, 0.35], [0.5, -0.35], [-0.5, -0.35]].map(([a, b]) => add(e, add(scale(f, size), add(scale(l, a * size), scale(u, b * size)))));
    tip.forEach((t, k) => { lines.put(e, colour); lines.put(t, colour); lines.put(t, colour); lines.put(tip[(k + 1) % 4], colour); });
  });
  const box = extent(y.design), centre = [(box[0] + box[2]) / 2, (box[1] + box[3]) / 2, m.room.ground], R = 0.75 * Math.max(box[2] - box[0], box[3] - box[1]);
  for (const month of [2, 5, 11]) {
    const day = monthStart[month] + 20;
    let before = null;
    for (let h = 0; h < 24 * y.n; h++) {
      const k = y.byRecord[day * 24 * y.n + h], s = k >= 0 && sunAt(y, k);
      if (s && s[2] > 0) {
        if (before) for (let j = 0; j < 8; j++) for (const t of [j / 8, (j + 1) / 8]) lines.put(add(centre, scale(unit(before.map((a, i) => a + (s[i] - a) * t)), R)), quiet);
        before = s;
      } else before = null;
    }
  }
  const now = y.byRecord[state.record];
  last.patches = 0; last.thrown = 0;
  if (now >= 0 && y.moments.direct[now] > 0) {
    const s = sunAt(y, now), p = add(centre, scale(s, R)), a = unit(cross(s, [0.3, 0.2, 1])), b = cross(s, a), r = 0.03 * R;
    for (let k = 0; k < 20; k++) for (const t of [-1, k, k + 1]) over.put(t < 0 ? p : add(p, add(scale(a, r * Math.cos((t * Math.PI) / 10)), scale(b, r * Math.sin((t * Math.PI) / 10)))), sun);
    if (y.moments.direct[now] > sunny) {
      const found = beams(m, s), weak = [...rgb("sun"), 150], mirror = [240, 200, 70, 190];
      last.patches = found.patches.filter((q) => !q.thrown).length; last.thrown = found.patches.filter((q) => q.thrown).length + found.paths.filter((q) => q.thrown).length;
      for (const q of found.patches) for (const k of [0, 1, 2, 0, 2, 3]) over.put(q.quad[k], q.thrown ? mirror : weak);
      for (const w of found.paths) for (let k = 0; k + 1 < w.points.length; k++) { lines.put(w.points[k], [...sun.slice(0, 3), 120]); lines.put(w.points[k + 1], [...sun.slice(0, 3), 120]); }
    }
  }
  lines.done("marks"); over.done("over");
}

// lit are luminances of what a view sees straight, in 16 bits by logarithm; what
// is seen through glass or in a mirror is left out. The shader makes illuminance
// of them: pi times luminance by the reflectance of what is drawn there.
const dimmest = 0.05, brightest = 1e6; // cd/m2, as pictures have them
function lit(v, lum, px, seen) {
  const n = v.worst_px, out = new Uint8Array(4 * n * n), whole = Math.log(brightest / dimmest);
  for (let i = 0; i < n * n; i++) {
    if (seen.kind[i] !== 1 || seen.via[i]) continue;
    const l = lum[Math.floor((Math.floor(i / n) * px) / n) * px + Math.floor(((i % n) * px) / n)];
    const code = Math.round(65535 * Math.min(1, Math.max(0, Math.log(l / dimmest) / whole)));
    out.set([code >> 8, code & 255, 0, 255], 4 * i);
  }
  return out;
}

function textures(v, lum, px, seen, lux) {
  let colours = new Uint8Array(4 * px * px), across = px;
  const parts = new Uint8Array(4 * v.worst_px * v.worst_px);
  if (lux) { colours = lit(v, lum, px, seen); across = v.worst_px; }
  else for (let i = 0; i < px * px; i++) { colours.set(luminanceScale.rgb(lum[i]), 4 * i); colours[4 * i + 3] = 255; }
  for (let i = 0; i < v.worst_px * v.worst_px; i++) { parts[4 * i] = seen.part[i] & 255; parts[4 * i + 1] = seen.part[i] >> 8; parts[4 * i + 2] = seen.via[i]; }
  const scale = new Uint8Array(4 * 256);
  for (let i = 0; i < 256; i++) scale.set([...luxScale.table.subarray(3 * i, 3 * i + 3), 255], 4 * i);
  [[0, colours, across, across, lux ? gl.NEAREST : gl.LINEAR], [1, parts, v.worst_px, v.worst_px, gl.NEAREST], [2, scale, 256, 1, gl.LINEAR]].forEach(([slot, data, n, rows, filter]) => {
    last["texture" + slot] ||= gl.createTexture();
    gl.activeTexture(gl.TEXTURE0 + slot); gl.bindTexture(gl.TEXTURE_2D, last["texture" + slot]);
    gl.texImage2D(gl.TEXTURE_2D, 0, gl.RGBA, n, rows, 0, gl.RGBA, gl.UNSIGNED_BYTE, data);
    for (const k of [gl.TEXTURE_MIN_FILTER, gl.TEXTURE_MAG_FILTER]) gl.texParameteri(gl.TEXTURE_2D, k, filter);
    for (const k of [gl.TEXTURE_WRAP_S, gl.TEXTURE_WRAP_T]) gl.texParameteri(gl.TEXTURE_2D, k, gl.CLAMP_TO_EDGE);
  });
  gl.uniform1i(at.seen, 0); gl.uniform1i(at.parts, 1); gl.uniform1i(at.lux, 2);
  gl.uniform1f(at.dim, dimmest); gl.uniform1f(at.span, Math.log(brightest / dimmest));
  gl.uniform1f(at.from, luxScale.from); gl.uniform1f(at.reach, Math.log(luxScale.to / luxScale.from));
  gl.uniform3fv(at.eye, v.position); gl.uniform3fv(at.front, v.axes[0]); gl.uniform3fv(at.left, v.axes[1]); gl.uniform3fv(at.up, v.axes[2]);
}

export async function drawRoom() {
  if (!gl) {
    canvas.hidden = true;
    document.querySelectorAll("#room .tools").forEach((e) => { e.hidden = true; });
    reading.textContent = "This browser draws no three-dimensional models (WebGL 2 is missing or switched off); the plan above shows the room, the desks and where the sun falls.";
    return;
  }
  const y = await year(state.design), m = await room(y, state.record), d = y.design, theme = css("paper");
  if (last.room !== m || last.theme !== theme) { geometry(m); if (!camera) reset(d); last.room = m; last.theme = theme; }
  if (camera && camera.eye && camera.eye.view !== state.view) look(d.views[state.view]);
  marks(m, y);
  const v = d.views[state.view];
  last.mode = 0;
  last.words = "";
  const lux = surface.value === "lux", plane = new Batch(), key = document.getElementById("l-room");
  key.replaceChildren();
  if (surface.value === "plane") {
    const cells = await planeLight(d, y), dark = y.byRecord[state.record] < 0;
    for (const c of (!dark && cells && cells.points) || []) {
      const q = c.size / 2, at = (a, b) => plane.put([c.x + a * q, c.y + b * q, c.z], [...luxScale.rgb(c.v), 255]);
      for (const [a, b] of [[-1, -1], [1, -1], [1, 1], [-1, -1], [1, 1], [-1, 1]]) at(a, b);
    }
    last.words = cells ? ` Illuminance of the work plane, half of it within ${percent(cells.median)} of the computed.` : " This page holds no illuminance of the work plane by hour.";
    if (cells) legend(key, luxScale, "illuminance, lx", lightTicks);
  }
  plane.done("plane");
  if ((surface.value === "seen" || lux) && v) {
    const f = await film(v, 24 * y.n), seen = await seenAt(y, v), frame = f ? f.frame(state.record) : -1;
    if (frame >= 0 && seen) {
      const px = f.pixels, lum = new Float32Array(px * px).fill(1), values = f.values(frame);
      f.numbers.inside.forEach((p, i) => { lum[p] = values[i]; });
      textures(v, lum, px, seen, lux);
      last.mode = lux ? 3 : 1;
      last.words = lux ? ` About the illuminance of matte surfaces that ${v.name} sees, by luminance and reflectance; half of the points within ${percent(f.exact.median_error)}.` : ` Luminance as ${v.name} sees it, on the surfaces that it sees.`;
      if (lux) legend(key, luxScale, "illuminance, lx", lightTicks);
      else legend(key, luminanceScale, "luminance, cd/m\u00b2", [10, 100, 1000, 10000].map((t) => [t, whole(t)]));
    } else last.words = " No picture of this hour; surfaces by finish.";
  }
  const now = y.byRecord[state.record];
  reading.textContent = `${timeOf(y, state.record)}: ` + (now < 0 ? "dark." : y.moments.direct[now] <= sunny ? "no sun to speak of." : last.patches + last.thrown ? `sun ${last.patches ? "falls through the openings" : ""}${last.patches && last.thrown ? " and " : ""}${last.thrown ? "is thrown by mirrors (yellow)" : ""}; drawn by straight rays, for display.` : "the sun reaches no opening.") + last.words + left(y) + (d.standings.length > 1 && now >= 0 ? ` With ${d.standings[standingAt(y, state.record)] || "all as drawn"}.` : "");
  canvas.setAttribute("aria-label", "Model of the room. " + reading.textContent);
  render();
}

const lightTicks = [30, 100, 300, 1000, 3000, 10000].map((v) => [v, whole(v)]);

// left tells of triangles that are not drawn.
function left(y) {
  const n = (y.design.room.left_out || [])[standingAt(y, state.record)];
  return n ? ` ${whole(n)} small triangles are left out of the drawing.` : "";
}

function reset(d) {
  const box = extent(d), high = Math.max(...d.room.openings.map((o) => o.corners[2][2]), d.room.min[2] + 2.5), size = Math.hypot(box[2] - box[0], box[3] - box[1]);
  const out = d.room.openings.reduce((s, o) => add(s, o.outward), [0, 0, 0]);
  camera = { yaw: Math.atan2(out[1], out[0]) + 0.65 || 0.6, pitch: 0.62, far: size * 1.55, target: [(box[0] + box[2]) / 2, (box[1] + box[3]) / 2, d.room.ground + 0.6], eye: null, low: d.room.ground, high: d.room.max[2], open: high };
  if (+cut.value === 100 && !cut.touched) cut.value = String(Math.round((100 * (high - 0.25 - camera.low)) / (camera.high - camera.low)));
}

function render() {
  if (!camera) return;
  const w = canvas.clientWidth, h = canvas.clientHeight, ratio = Math.min(2, Math.max(1.5, window.devicePixelRatio || 1));
  canvas.width = Math.round(w * ratio); canvas.height = Math.round(h * ratio);
  gl.viewport(0, 0, canvas.width, canvas.height);
  const paper = rgb("paper");
  gl.clearColor(paper[0] / 255, paper[1] / 255, paper[2] / 255, 1); gl.clear(gl.COLOR_BUFFER_BIT | gl.DEPTH_BUFFER_BIT);
  gl.enable(gl.DEPTH_TEST); gl.disable(gl.CULL_FACE);
  gl.uniform3fv(at.paper, paper.map((c) => c / 255));
  let from, to;
  if (camera.eye) { from = camera.eye.position; const c = Math.cos(camera.eye.pitch); to = add(from, [Math.cos(camera.eye.yaw) * c, Math.sin(camera.eye.yaw) * c, Math.sin(camera.eye.pitch)]); }
  else { const c = Math.cos(camera.pitch); to = camera.target; from = add(to, scale([Math.cos(camera.yaw) * c, Math.sin(camera.yaw) * c, Math.sin(camera.pitch)], camera.far)); }
  gl.uniformMatrix4fv(at.see, false, matrix(from, to, w / h, camera.eye ? 1.45 : 0.6, camera.eye ? 0.05 : 0.3));
  gl.uniform1f(at.top, camera.eye ? 1e6 : camera.low + ((camera.high - camera.low) * cut.value) / 100 + 0.01);
  gl.disable(gl.BLEND); gl.enable(gl.POLYGON_OFFSET_FILL); gl.polygonOffset(1.5, 2);
  paint("solid", gl.TRIANGLES, last.mode);
  paint("plane", gl.TRIANGLES, 2);
  gl.disable(gl.POLYGON_OFFSET_FILL);
  gl.enable(gl.BLEND); gl.blendFunc(gl.SRC_ALPHA, gl.ONE_MINUS_SRC_ALPHA);
  paint("lines", gl.LINES, 2);
  gl.depthMask(false);
  paint("glass", gl.TRIANGLES, last.mode);
  gl.uniform1f(at.top, 1e6);
  paint("over", gl.TRIANGLES, 2); paint("marks", gl.LINES, 2);
  gl.depthMask(true);
}

function matrix(from, to, aspect, fov, near) {
  const f = unit(sub(to, from)), r = unit(cross(f, [0, 0, 1])), u = cross(r, f), t = 1 / Math.tan(fov / 2), far = near * 1500, a = (far + near) / (near - far), b = (2 * far * near) / (near - far);
  const s = [t / aspect, t], row = (v, k) => [v[0] * k, v[1] * k, v[2] * k, -dot(v, from) * k];
  const X = row(r, s[0]), Y = row(u, s[1]), Z = row(f, 1);
  return [X[0], Y[0], -a * Z[0], Z[0], X[1], Y[1], -a * Z[1], Z[1], X[2], Y[2], -a * Z[2], Z[2], X[3], Y[3], -a * Z[3] + b, Z[3]];
}

function turn(dx, dy) {
  const c = camera.eye || camera;
  c.yaw -= dx * (camera.eye ? -0.6 : 1);
  c.pitch = Math.max(camera.eye ? -1.4 : 0.05, Math.min(1.5, c.pitch + dy));
  render();
}
function near(k) { if (!camera.eye) { camera.far = Math.max(1, Math.min(200, camera.far * k)); render(); } }

let drag = null;
canvas.addEventListener("pointerdown", (e) => { drag = [e.clientX, e.clientY]; canvas.setPointerCapture(e.pointerId); });
canvas.addEventListener("pointermove", (e) => { if (drag && camera) { turn((e.clientX - drag[0]) / 160, (e.clientY - drag[1]) / 160); drag = [e.clientX, e.clientY]; } });
canvas.addEventListener("pointerup", () => { drag = null; });
// The wheel belongs to the page until the model is in use.
canvas.addEventListener("wheel", (e) => { if (document.activeElement === canvas && camera) { e.preventDefault(); near(Math.exp(e.deltaY / 900)); } }, { passive: false });
canvas.addEventListener("keydown", (e) => {
  const by = { ArrowLeft: [-0.1, 0], ArrowRight: [0.1, 0], ArrowUp: [0, 0.07], ArrowDown: [0, -0.07] }[e.key];
  if (!camera || (!by && e.key !== "+" && e.key !== "-")) return;
  e.preventDefault();
  if (by) turn(...by); else near(e.key === "+" ? 0.9 : 1.1);
});
surface.addEventListener("change", () => drawRoom());
cut.addEventListener("input", () => { cut.touched = true; render(); });
document.getElementById("room-reset").addEventListener("click", () => { camera = null; reset(designs[state.design]); drawRoom(); });
document.getElementById("room-eye").addEventListener("click", () => { look(designs[state.design].views[state.view]); drawRoom(); });

// look puts the camera into a viewpoint's eye.
function look(v) {
  if (!v || !camera) return;
  const f = v.axes[0];
  camera.eye = { view: state.view, position: v.position, yaw: Math.atan2(f[1], f[0]), pitch: Math.asin(f[2]) };
}
