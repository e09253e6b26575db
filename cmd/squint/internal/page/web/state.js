// What is shown. Every part of the page listens and draws itself anew.

export const state = { design: 0, view: 0, record: 0, metric: "hour", series: "dgp" };
const listeners = [];

export const listen = (f) => listeners.push(f);

let asked = false;
export function show(change) {
  Object.assign(state, change);
  if (asked) return;
  asked = true;
  requestAnimationFrame(() => { asked = false; draw(); });
}

// draw runs all parts; what was changed meanwhile draws again.
export function draw() {
  return Promise.all(listeners.map((f) => Promise.resolve(f(state)).catch((e) => console.error(e))));
}
