// The report's page: puts the parts together and listens to the reader.
import { page, designs, year, timeOf, hourMinute, percent, monthStart } from "./data.js";
import { state, show, draw, listen } from "./state.js";
import { plan } from "./plan.js";
import { drawYear, pointOf } from "./year.js";
import { eye } from "./eye.js";
import { best } from "./film.js";
import { drawRoom } from "./room.js";

const $ = (id) => document.getElementById(id);

function worstView(d) {
  let best = 0;
  d.views.forEach((v, i) => { if (v.over > d.views[best].over) best = i; });
  return best;
}

function worstRecord(d, view) {
  const v = d.views[view];
  return v && v.worst >= 0 ? v.worst : ((monthStart[2] + 20) * 24 + 12) * d.per_hour;
}

async function bar() {
  const y = await year(state.design), d = y.design, pick = $("pick-view");
  document.querySelectorAll(".design").forEach((e) => { e.hidden = +e.dataset.design !== state.design; });
  if (pick.options.length !== d.views.length || pick.dataset.design !== String(state.design)) {
    pick.replaceChildren(...d.views.map((v, i) => new Option(v.name, i)));
    pick.dataset.design = String(state.design);
  }
  pick.value = String(state.view);
  if ($("pick-design")) $("pick-design").value = String(state.design);
  const perDay = 24 * y.n;
  $("pick-hour").max = perDay - 1;
  $("pick-day").value = y.day(state.record); $("pick-hour").value = state.record % perDay;
  $("pick-day").setAttribute("aria-valuetext", timeOf(y, state.record)); $("pick-hour").setAttribute("aria-valuetext", `from ${hourMinute(Math.round(60 * y.clock(state.record)))} h`);
  $("now").textContent = timeOf(y, state.record);
  document.querySelectorAll(".view-name").forEach((e) => { e.textContent = d.views[state.view] ? d.views[state.view].subject : "the room"; });
  views(d);
}

// views is the plan's table, and its way in for readers without a pointer.
let listed = "";
function views(d) {
  const key = state.design + "/" + state.view;
  if (listed === key) return;
  listed = key;
  const rows = d.views.map((v, i) => {
    const row = document.createElement("tr"), name = document.createElement("th"), word = document.createElement("td"), share = document.createElement("td"), b = document.createElement("button"), w = document.createElement("span");
    b.type = "button"; b.textContent = v.subject; b.addEventListener("click", () => show({ view: i, record: worstRecord(d, i) }));
    name.scope = "row"; name.append(b); w.className = "word " + v.outcome; w.textContent = v.outcome === "none" ? "-" : v.outcome; word.append(w);
    share.className = "n"; share.textContent = v.over < 0 ? "-" : `${(100 * v.over).toFixed(1)} %`;
    if (i === state.view) row.setAttribute("aria-current", "true");
    row.append(name, word, share);
    return row;
  });
  const body = $("t-views").tBodies[0], focus = [...body.querySelectorAll("button")].indexOf(document.activeElement);
  body.replaceChildren(...rows);
  if (focus >= 0) body.querySelectorAll("button")[focus]?.focus();
}

function exact() {
  const p = document.createElement("p"), views = designs.flatMap((d) => d.views.filter((v) => v.has_shots)), said = designs.map(pictures).filter((t) => t);
  const list = document.createElement("ul");
  list.className = "notes";
  list.append(...said.map((t) => { const e = document.createElement("li"); e.textContent = t; return e; }));
  p.textContent = "Verdicts, counts and every DGP and illuminance at the eye come from the whole computation; this page only shows them." +
    (views.length ? ` Pictures of any hour are for display and made of a few patterns, as listed below. The worst hours are shown as they were computed, ${views[0].worst_px} pixels across.` : "") +
    " The sun on plan and model is drawn by straight rays and sharp mirrors alone. Illuminance of surfaces in the model is their luminance as a viewpoint sees it, times pi, by their reflectance; mirrors, cloth and what stands behind glass are left out.";
  $("exact").append(p, list);
}

// pictures says how exact a design's pictures of any hour are; "" where it has
// none at all.
function pictures(d) {
  const name = designs.length > 1 ? `\u201c${d.alternative}\u201d: ` : "", films = d.views.filter((v) => v.has_shots);
  if (!films.length) return "";
  const held = films.map(best).filter((s) => s);
  if (!held.length) return name + "none, as the page would become too large.";
  const list = held.map((s) => s.median_error), [least, most] = [Math.min(...list), Math.max(...list)].map((e) => percent(e));
  return `${name || "Pictures of any hour: "}${held[0].pixels} pixels across, ${Math.max(...held.map((s) => s.rank))} patterns a view${held[0].small ? ", of the hours in use alone" : ""}, half of the points within ${least === most ? most : `${least} to ${most}, by view,`} of the computed ones.`;
}

// perDay is the number of records in a day of the chosen design.
const perDay = () => 24 * designs[state.design].per_hour;

// chooseDesign keeps the hour where designs have other steps.
function chooseDesign(i) {
  const from = designs[state.design].per_hour, to = designs[i].per_hour;
  show({ design: i, view: Math.max(0, Math.min(state.view, designs[i].views.length - 1)), record: Math.floor((state.record * to) / from) });
}

function start() {
  state.design = page.chosen;
  const d = designs[state.design];
  state.view = d.views.length ? worstView(d) : 0;
  state.record = worstRecord(d, state.view);
  $("bar").hidden = false;
  document.querySelectorAll(".drawn").forEach((e) => { e.hidden = false; });
  if (!d.views.length) ["year", "eye"].forEach((id) => { $(id).hidden = id === "eye" || !d.planes.length; });
  $("pick-design")?.addEventListener("change", (e) => chooseDesign(+e.target.value));
  $("pick-view").addEventListener("change", (e) => show({ view: +e.target.value }));
  $("pick-day").addEventListener("input", (e) => show({ record: +e.target.value * perDay() + (state.record % perDay()) }));
  $("pick-hour").addEventListener("input", (e) => show({ record: Math.floor(state.record / perDay()) * perDay() + +e.target.value }));
  $("pick-worst").addEventListener("click", () => show({ record: worstRecord(designs[state.design], state.view) }));
  $("bar").addEventListener("submit", (e) => e.preventDefault());
  exact();
  [bar, plan, drawYear, eye, drawRoom].forEach(listen);
  // Light, dark and paper have colours of their own.
  matchMedia("(prefers-color-scheme: dark)").addEventListener("change", draw);
  matchMedia("print").addEventListener("change", draw);
  let wide = 0;
  new ResizeObserver(() => { if (Math.abs(document.body.clientWidth - wide) > 4) { wide = document.body.clientWidth; show({}); } }).observe(document.body);
  return draw();
}

// What tests read: lit are the hours in use with daylight.
window.squint = { state, show, draw, pointOf, lit: [] };
window.squint.ready = start().then(async () => {
  const y = await year(state.design);
  window.squint.lit = [...y.moments.record].filter((r) => y.records.used[r]);
  return true;
});
