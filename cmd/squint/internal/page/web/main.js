// The report's page: puts the parts together and listens to the reader.
import { page, designs, year, timeOf, percent, noValue, monthStart } from "./data.js";
import { state, show, draw, listen } from "./state.js";
import { plan } from "./plan.js";
import { drawYear, pointOf } from "./year.js";
import { eye } from "./eye.js";
import { drawRoom } from "./room.js";

const $ = (id) => document.getElementById(id);

function worstView(d) {
  let best = 0;
  d.views.forEach((v, i) => { if (v.over > d.views[best].over) best = i; });
  return best;
}

function worstRecord(d, view) {
  const v = d.views[view];
  return v && v.worst >= 0 ? v.worst : (monthStart[2] + 20) * 24 + 12;
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
  const day = Math.floor(state.record / 24), hour = y.clock(state.record);
  $("pick-day").value = day; $("pick-hour").value = state.record % 24;
  $("pick-day").setAttribute("aria-valuetext", timeOf(y, state.record)); $("pick-hour").setAttribute("aria-valuetext", `${hour} h`);
  $("now").textContent = timeOf(y, state.record);
  document.querySelectorAll(".view-name").forEach((e) => { e.textContent = d.views[state.view] ? d.views[state.view].subject : "the room"; });
  views(d);
}

// views is the plan's table, and its way in for readers without a pointer.
function views(d) {
  const rows = d.views.map((v, i) => {
    const row = document.createElement("tr"), name = document.createElement("th"), word = document.createElement("td"), share = document.createElement("td"), b = document.createElement("button"), w = document.createElement("span");
    b.type = "button"; b.textContent = v.subject; b.addEventListener("click", () => show({ view: i, record: worstRecord(d, i) }));
    name.scope = "row"; name.append(b); w.className = "word " + v.outcome; w.textContent = v.outcome; word.append(w);
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
  const d = designs[page.chosen], films = d.views.filter((v) => v.has_shots);
  const p = document.createElement("p"), list = films.map((v) => v.shots.median_error);
  p.textContent = "Verdicts, counts and every DGP and illuminance at the eye come from the whole computation; this page only shows them." +
    (films.length ? ` Pictures of any hour${designs.length > 1 ? ` are in it for \u201c${d.alternative}\u201d, and` : ""} are made of ${films[0].shots.rank} patterns a view, ${films[0].shots.pixels} pixels across: half of their points lie within ${percent(Math.min(...list))} to ${percent(Math.max(...list))} of the computed ones, by view. The worst hours are shown as they were computed, ${films[0].worst_px} pixels across.` : "") +
    " The sun on plan and model is drawn by straight rays and sharp mirrors alone.";
  $("exact").append(p);
}

function start() {
  state.design = page.chosen;
  const d = designs[state.design];
  state.view = d.views.length ? worstView(d) : 0;
  state.record = worstRecord(d, state.view);
  $("bar").hidden = false;
  document.querySelectorAll(".drawn").forEach((e) => { e.hidden = false; });
  if (!d.views.length) ["year", "eye"].forEach((id) => { $(id).hidden = id === "eye" || !d.planes.length; });
  $("pick-design")?.addEventListener("change", (e) => show({ design: +e.target.value, view: Math.min(state.view, designs[+e.target.value].views.length - 1) }));
  $("pick-view").addEventListener("change", (e) => show({ view: +e.target.value }));
  $("pick-day").addEventListener("input", (e) => show({ record: +e.target.value * 24 + (state.record % 24) }));
  $("pick-hour").addEventListener("input", (e) => show({ record: Math.floor(state.record / 24) * 24 + +e.target.value }));
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
