// The page's numbers: JSON blocks, inflated when they are first needed.

export const page = JSON.parse(document.getElementById("data").textContent);
export const designs = page.designs;

const width = { u8: 1, i8: 1, u16: 2, i16: 2, u32: 4, z16: 2 };
const cache = new Map();

// load returns a promise of a blob's lists by name; null where the page does
// not hold it.
export function load(blob) {
  if (!blob || !blob.id) return Promise.resolve(null);
  // Blobs of equal bytes may be cut into lists in other ways.
  const key = blob.id + blob.parts.map((p) => p.name + p.n).join();
  if (!cache.has(key)) cache.set(key, inflate(blob));
  return cache.get(key);
}

// holds is whether the page has a blob's numbers.
export const holds = (blob) => Boolean(blob && blob.id && document.getElementById("n-" + blob.id));

async function inflate(blob) {
  const block = document.getElementById("n-" + blob.id);
  if (!block) return null;
  const packed = fromText(JSON.parse(block.textContent));
  const stream = new Blob([packed]).stream().pipeThrough(new DecompressionStream("deflate-raw"));
  const bytes = new Uint8Array(await new Response(stream).arrayBuffer());
  const lists = {};
  let at = 0;
  for (const { name, type, n } of blob.parts) {
    lists[name] = unpack(bytes.subarray(at, at + n * width[type]), type, n);
    at += n * width[type];
  }
  return lists;
}

// fromText reads base 85: five characters are four bytes, a z is four zeros, and
// v, w, x and y stand for characters that HTML or JSON would read otherwise.
function fromText(text) {
  const digit = new Uint8Array(128), out = new Uint8Array(4 * text.length);
  for (let c = 33; c < 118; c++) digit[c] = c - 33;
  [..."vwxy"].forEach((c, i) => { digit[c.charCodeAt(0)] = '"\\<&'.charCodeAt(i) - 33; });
  let n = 0, v = 0, k = 0;
  const put = (bytes) => { for (let b = 0; b < bytes; b++) out[n++] = Math.floor(v / 256 ** (3 - b)) % 256; };
  for (let i = 0; i < text.length; i++) {
    const c = text.charCodeAt(i);
    if (c === 122 && k === 0) { n += 4; continue; }
    v = v * 85 + digit[c];
    if (++k === 5) { put(4); v = 0; k = 0; }
  }
  if (k) { for (let i = k; i < 5; i++) v = v * 85 + 84; put(k - 1); }
  return out.subarray(0, n);
}

// unpack turns planes of bytes, the lowest first, into numbers.
function unpack(bytes, type, n) {
  if (type === "u8") return bytes;
  if (type === "i8") return new Int8Array(bytes.buffer, bytes.byteOffset, n);
  const out = type === "u16" || type === "z16" ? new Uint16Array(n) : type === "i16" ? new Int16Array(n) : new Uint32Array(n);
  for (let k = 0; k < width[type]; k++) for (let i = 0; i < n; i++) out[i] |= bytes[k * n + i] << (8 * k);
  return type === "z16" ? Int16Array.from(out, (x) => (x >>> 1) ^ -(x & 1)) : out;
}

export const noValue = 65535;

const months = ["January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November", "December"];
const lengths = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];
export const monthNames = months;
export const monthStart = lengths.map((_, i) => lengths.slice(0, i).reduce((a, b) => a + b, 0));
export const monthOf = (day) => { let m = 11; while (monthStart[m] > day) m--; return m; };
const dateOf = (day) => `${day - monthStart[monthOf(day)] + 1} ${months[monthOf(day)]}`;

// whole groups thousands by thin spaces.
export const whole = (x) => Math.round(x).toString().replace(/\B(?=(\d{3})+(?!\d))/g, "\u202f");
export const percent = (x, digits = 1) => `${(100 * x).toFixed(digits).replace(/\.0$/, "")}\u00a0%`;

// year holds what all parts of the page read of one design.
const years = new Map();
export function year(design) {
  if (!years.has(design)) years.set(design, readYear(designs[design]));
  return years.get(design);
}

async function readYear(d) {
  const [records, days, moments, ...series] = await Promise.all([load(d.records), load(d.days), load(d.moments), ...d.views.map((v) => load(v.series))]);
  const byRecord = new Int32Array(records.used.length).fill(-1);
  moments.record.forEach((r, i) => { byRecord[r] = i; });
  // n records make an hour; clock is when a record begins, in hours.
  const n = d.per_hour || 1, day = (record) => Math.floor(record / (24 * n));
  const clock = (record) => (record % (24 * n)) / n + days.shift[day(record)];
  return { design: d, n, records, days, moments, series, byRecord, day, clock };
}

// standingAt says how what moves stands at a record; in the dark as in the first
// standing.
export const standingAt = (y, record) => { const k = y.records.standing[record]; return k === 255 ? 0 : k; };

// sunAt is the unit direction to the sun of a moment.
export const sunAt = (y, moment) => [0, 1, 2].map((k) => y.moments.sun[3 * moment + k] / 32767);

const daysOfYear = 365, dayMinutes = 24 * 60;

// minuteOf is the clock's time of a record, in minutes of its day;
// in the dark that of the record's middle.
export function minuteOf(y, record) {
  const m = y.byRecord[record];
  return (m >= 0 ? y.moments.minute[m] : Math.floor((((record % (24 * y.n)) + 0.5) * 60) / y.n)) + 60 * y.days.shift[y.day(record)];
}

export const hourMinute = (minutes) => `${String(Math.floor(minutes / 60)).padStart(2, "0")}:${String(minutes % 60).padStart(2, "0")}`;

// timeOf is the clock's date and time of a record; past midnight it is the next day.
export function timeOf(y, record) {
  const minutes = minuteOf(y, record), later = Math.floor(minutes / dayMinutes);
  return `${dateOf((y.day(record) + later) % daysOfYear)}, ${hourMinute(minutes - later * dayMinutes)} h`;
}

// hours are records as hours, with a fraction where they are finer.
export const hours = (y, records) => (y.n === 1 ? whole(records) : (records / y.n).toFixed(2).replace(/\.?0+$/, ""));
