"use strict";
const $ = id => document.getElementById(id);
const numbers = ["dish_m", "power_w", "least_elevation_deg", "pointing_error_deg", "exceeded_percent"];
let state = null, heard = 0, detail = null, chosen = "", changes = {};

// Texts of the scenario come in as text alone, never as markup.
function make(kind, text, attributes) {
  const e = document.createElement(kind);
  if (text !== undefined) e.textContent = text;
  for (const [k, v] of Object.entries(attributes || {})) e.setAttribute(k, v);
  return e;
}
function draw(into, kind, attributes, text) {
  const e = document.createElementNS("http://www.w3.org/2000/svg", kind);
  for (const [k, v] of Object.entries(attributes)) e.setAttribute(k, v);
  if (text !== undefined) e.textContent = text;
  into.append(e);
  return e;
}
const show = (v, digits = 1) => v === null || v === undefined ? "–" : v.toFixed(digits).replace(/^-(0(\.0*)?)$/, "$1");
const stamp = t => new Date(t).toISOString().slice(0, 19).replace("T", " ");
const hour = t => new Date(t).toISOString().slice(11, 19);
const now = () => Date.parse(state.now_utc) + (performance.now() - heard) * state.speed;
const called = c => c.spacecraft + " over " + c.station + (c.transmitter ? ", " + c.transmitter : "");
function span(ms) {
  const s = Math.max(0, Math.round(ms / 1000)), two = n => String(n).padStart(2, "0");
  return Math.floor(s / 3600) + ":" + two(Math.floor(s / 60) % 60) + ":" + two(s % 60);
}
function row(into, head, cells) {
  const tr = make("tr"), th = make("th", undefined, {scope: "row"});
  th.append(head);
  tr.append(th);
  for (const c of cells) {
    const td = make("td", c.text ?? c);
    if (c.until) td.dataset.until = c.until;
    tr.append(td);
  }
  into.append(tr);
  return tr;
}

// fill writes the tables of a state. The table of contacts is only made anew when
// it changes, so that the focus stays where it is.
let shownNext = "";
function fill() {
  $("scenario").textContent = state.scenario;
  $("faults").hidden = !state.fault;
  if ($("fault").textContent !== state.fault) $("fault").textContent = state.fault;
  $("signals").replaceChildren();
  $("signal-notes").replaceChildren();
  const byID = Object.fromEntries(state.next.map(c => [c.id, c]));
  for (const s of state.signals) {
    const c = byID[s.id];
    row($("signals"), called(c) + (s.mode ? ", " + s.mode : ""), [{text: "", until: c.los_utc}, show(s.azimuth_deg), show(s.elevation_deg), show(s.range_km, 0),
      show(s.doppler_hz === null ? null : s.doppler_hz / 1000, 2), show(s.received_power_dbm), show(s.c_n0_dbhz), show(s.eb_n0_db), show(s.margin_db)]);
    for (const n of s.notes) $("signal-notes").append(make("li", called(c) + ": " + n));
  }
  if (!state.signals.length) row($("signals"), "no contact is under way", []);
  const list = state.next.map(c => c.id).join() + state.generation + chosen;
  if (list !== shownNext) {
    const had = document.activeElement?.dataset?.contact;
    shownNext = list;
    $("next").replaceChildren();
    $("none").hidden = state.next.length > 0;
    for (const c of state.next) {
      const b = make("button", called(c), {type: "button", "data-contact": c.id, "aria-pressed": c.id === chosen});
      b.addEventListener("click", () => choose(c.id));
      const tr = row($("next"), b, [{text: "", until: c.aos_utc}, hour(c.aos_utc), hour(c.los_utc), show(c.max_elevation_deg), show(c.aos_azimuth_deg, 0) + ", " + show(c.los_azimuth_deg, 0)]);
      if (c.id === chosen) tr.className = "chosen";
      if (c.id === had) b.focus();
    }
  }
  $("craft").replaceChildren();
  for (const c of state.spacecraft)
    row($("craft"), c.name, [show(c.latitude_deg), show(c.longitude_deg), show(c.radius_km, 0), c.light || "–", stamp(c.element_epoch_utc), show(c.element_age_days)]);
  if (!chosen && state.next.length) choose((state.next.find(c => c.transmitter) || state.next[0]).id);
}

function map() {
  const m = $("map");
  m.replaceChildren();
  for (let lon = -180; lon <= 180; lon += 30) draw(m, "line", {class: "grid", x1: lon, x2: lon, y1: -90, y2: 90});
  for (let lat = -90; lat <= 90; lat += 30) draw(m, "line", {class: "grid", x1: -180, x2: 180, y1: -lat, y2: -lat});
  const mark = (lon, lat, name) => draw(m, "text", {x: lon > 110 ? lon - 5 : lon + 5, y: 2.5 - lat, "text-anchor": lon > 110 ? "end" : "start"}, name);
  for (const s of state.stations) {
    draw(m, "path", {class: "site", d: `M${s.longitude_deg - 3} ${2.5 - s.latitude_deg}h6l-3-5z`});
    mark(s.longitude_deg, s.latitude_deg, s.name);
  }
  for (const c of state.spacecraft) {
    if (c.latitude_deg === null) continue;
    draw(m, "circle", {class: "dot" + (c.light === "sun" ? " lit" : ""), cx: c.longitude_deg, cy: -c.latitude_deg, r: 3});
    mark(c.longitude_deg, c.latitude_deg, c.name);
  }
}

// at finds a column's value at so many seconds after AOS.
function at(column, s) {
  const t = detail.seconds;
  let i = t.findIndex(v => v >= s);
  if (i < 1) i = i === 0 ? 1 : t.length - 1;
  if (column[i] === null || column[i - 1] === null) return null;
  let d = column[i] - column[i - 1];
  if (column === detail.azimuth_deg) d = ((d + 540) % 360) - 180;
  return column[i - 1] + d * (s - t[i - 1]) / (t[i] - t[i - 1]);
}
const polar = (az, el) => [(90 - el) / 90 * 100 * Math.sin(az * Math.PI / 180), -(90 - el) / 90 * 100 * Math.cos(az * Math.PI / 180)];
const path = points => points.map((p, i) => (i ? "L" : "M") + p[0].toFixed(1) + " " + p[1].toFixed(1)).join("");

function charts() {
  const sky = $("sky"), s = (now() - Date.parse(detail.aos_utc)) / 1000, last = detail.seconds.at(-1), under = s >= 0 && s <= last;
  sky.replaceChildren();
  for (const el of [0, 30, 60]) {
    draw(sky, "circle", {class: "grid", r: (90 - el) / 90 * 100});
    draw(sky, "text", {x: 2, y: -(90 - el) / 90 * 100 + 11}, el + "°");
  }
  for (const [az, word] of [[0, "N"], [90, "E"], [180, "S"], [270, "W"]]) {
    const [x, y] = polar(az, -8);
    draw(sky, "text", {x: x, y: y + 4, "text-anchor": "middle"}, word);
  }
  draw(sky, "path", {class: "track", d: path(detail.azimuth_deg.map((az, i) => polar(az, detail.elevation_deg[i])))});
  if (under) {
    const [x, y] = polar(at(detail.azimuth_deg, s), at(detail.elevation_deg, s));
    draw(sky, "circle", {class: "dot lit", cx: x, cy: y, r: 5});
  }
  $("sky-text").textContent = `North up, east to the right, horizon at the rim. From azimuth ${show(detail.aos_azimuth_deg, 0)}° up to ${show(detail.max_elevation_deg)}° and down at ${show(detail.los_azimuth_deg, 0)}°.` + (under ? " The dot is where it stands now." : "");
  lines("elevation", detail.elevation_deg, null, s, "°");
  lines("margin", detail.margin_db, detail.required_margin_db, s, " dB");
}

function lines(id, column, limit, s, unit) {
  const g = $(id), left = 40, right = 470, top = 10, bottom = 190, last = detail.seconds.at(-1);
  g.replaceChildren();
  const known = column.filter(v => v !== null);
  if (!known.length) {
    draw(g, "text", {x: 240, y: 110, "text-anchor": "middle"}, "not known");
    $(id + "-text").textContent = "Not known for this contact.";
    return;
  }
  const low = Math.floor(Math.min(0, ...known, limit ?? 0) / 10) * 10, high = Math.ceil(Math.max(10, ...known) / 10) * 10;
  const x = v => left + (right - left) * v / last, y = v => bottom - (bottom - top) * (v - low) / (high - low);
  const step = (high - low) / 10 > 5 ? 20 : 10;
  for (let v = low; v <= high; v += step) {
    draw(g, "line", {class: "grid", x1: left, x2: right, y1: y(v), y2: y(v)});
    draw(g, "text", {x: left - 5, y: y(v) + 4, "text-anchor": "end"}, String(v));
  }
  for (const part of [0, .25, .5, .75, 1])
    draw(g, "text", {x: x(last * part), y: bottom + 18, "text-anchor": part === 1 ? "end" : part ? "middle" : "start"}, hour(Date.parse(detail.aos_utc) + last * part * 1000));
  draw(g, "path", {class: "track", d: path(column.map((v, i) => [x(detail.seconds[i]), v]).filter(p => p[1] !== null).map(p => [p[0], y(p[1])]))});
  if (limit !== null) draw(g, "line", {class: "limit", x1: left, x2: right, y1: y(limit), y2: y(limit)});
  const under = s >= 0 && s <= last;
  if (under) draw(g, "line", {class: "now", x1: x(s), x2: x(s), y1: top, y2: bottom});
  $(id + "-text").textContent = `UTC to the right. From ${show(Math.min(...known))} to ${show(Math.max(...known))}${unit}` +
    (limit !== null ? `; dashed: ${show(limit)} dB required` : "") + (under ? `; now ${show(at(column, s))}${unit} (dotted)` : "") + ".";
}

async function ask(address, options) {
  const r = await fetch(address, options), answer = await r.json();
  if (!r.ok) throw new Error(answer.error);
  return answer;
}
async function choose(id) {
  chosen = id;
  remember();
  try {
    const d = await ask("/api/contacts/" + encodeURIComponent(id));
    if (chosen !== id) return;
    detail = d;
    $("chosen").hidden = false;
    $("refused").textContent = "";
    $("chosen-title").textContent = called(d);
    $("chosen-facts").textContent = `${stamp(d.aos_utc)} to ${hour(d.los_utc)} UTC` + (d.mode ? `, mode ${d.mode}, ${show(d.bytes === null ? null : d.bytes / 1e6)} MB` : "") + ".";
    $("mode").replaceChildren(make("option", "the one that brings most", {value: ""}), ...d.modes.map(m => make("option", m, {value: m})));
    const has = {dish_m: d.dish_m, power_w: d.power_w, least_elevation_deg: d.minimum_elevation_deg, pointing_error_deg: d.pointing_error_deg, exceeded_percent: d.exceeded_percent};
    for (const n of numbers) {
      $(n).placeholder = has[n] === null ? "" : String(Number(has[n].toPrecision(4)));
      $(n).disabled = has[n] === null;
      $(n).value = changes[n] ?? "";
    }
    $("mode").value = d.modes.includes(changes.mode) ? changes.mode : "";
    shownNext = "";
    fill();
    second();
    $("answer").hidden = true;
    if (Object.keys(changes).length) work();
  } catch (e) {
    $("refused").textContent = $("link").textContent = e.message;
    if (!detail && chosen === id) chosen = ""; // the first contact to come takes its place
  }
}
async function work() {
  $("refused").textContent = "";
  const q = {contact: chosen, ...changes};
  try {
    const a = await ask("/api/what-if", {method: "POST", headers: {"Content-Type": "application/json"}, body: JSON.stringify(q)});
    $("answer").hidden = false;
    $("outcomes").replaceChildren();
    for (const [head, o] of [["as in the scenario", a.before], ["with the changes", a.after]])
      row($("outcomes"), head, o.used ? [o.mode || "–", show(o.seconds, 0), show(o.least_margin_db), show(o.greatest_margin_db), show(o.bytes === null ? null : o.bytes / 1e6)] : ["never that high", "0", "–", "–", "0.0"]);
  } catch (e) {
    $("answer").hidden = true;
    $("refused").textContent = e.message;
  }
}
function remember() {
  history.replaceState(null, "", "#" + new URLSearchParams({contact: chosen, ...changes}));
}
function recall() {
  const p = new URLSearchParams(location.hash.slice(1));
  changes = {};
  for (const n of numbers) if (p.has(n) && Number.isFinite(Number(p.get(n)))) changes[n] = Number(p.get(n));
  if (p.get("mode")) changes.mode = p.get("mode");
  if (p.get("contact")) choose(p.get("contact"));
}
$("what-if").addEventListener("submit", e => {
  e.preventDefault();
  changes = {};
  for (const n of numbers) if ($(n).value !== "" && !$(n).disabled) changes[n] = Number($(n).value);
  if ($("mode").value) changes.mode = $("mode").value;
  remember();
  work();
});
$("what-if").addEventListener("reset", () => { changes = {}; $("answer").hidden = true; $("refused").textContent = ""; remember(); });

function second() {
  if (!state) return;
  const t = now();
  $("time").textContent = stamp(t) + " UTC" + (state.speed === 1 ? "" : `, ${state.speed} times as fast as the clock`) +
    (t < Date.parse(state.window_start_utc) ? "; the window begins " + stamp(state.window_start_utc) : t > Date.parse(state.window_end_utc) ? "; the window ended " + stamp(state.window_end_utc) : "");
  for (const e of document.querySelectorAll("[data-until]")) {
    const left = Date.parse(e.dataset.until) - t;
    e.textContent = left > 0 ? span(left) : "under way";
  }
  if (detail) charts();
}
let generation = 0;
const source = new EventSource("/events");
source.addEventListener("state", e => {
  const first = !state;
  state = JSON.parse(e.data);
  heard = performance.now();
  if ($("link").textContent) $("link").textContent = "";
  if (first) recall(); // before the first contact is chosen, which takes the address
  fill();
  map();
  if (!first && generation !== state.generation && chosen) { shownNext = ""; choose(chosen); }
  generation = state.generation;
  second();
});
source.addEventListener("error", () => { $("link").textContent = "The program does not answer; what stands here grows old. Trying again."; });
setInterval(second, 500);
