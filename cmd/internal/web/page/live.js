const $ = id => document.getElementById(id);
const numbers = ["dish_m", "power_w", "least_elevation_deg", "pointing_error_deg", "exceeded_percent"];
const saveKey = document.querySelector("meta[name=save-key]").content;
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
const show = (v, digits = 1) => v === null || v === undefined ? "–" : v.toFixed(digits).replace(/^-(0(\.0*)?)$/, "$1").replace(/^-/, "−");
// volume has the digits that the report's pages have.
function volume(bytes) {
  if (bytes === null || bytes === undefined) return "–";
  const [unit, divisor] = [["TB", 1e12], ["GB", 1e9], ["MB", 1e6], ["kB", 1e3]].find(s => bytes >= s[1]) || ["B", 1];
  const x = bytes / divisor;
  return x.toFixed(divisor === 1 || x >= 100 ? 0 : x >= 10 ? 1 : 2) + " " + unit;
}
const stamp = t => new Date(t).toISOString().slice(0, 19).replace("T", " ");
const hour = t => new Date(t).toISOString().slice(11, 19);
const day = t => new Date(t).toISOString().slice(5, 10);
const dated = t => (day(t) === day(state.now_utc) ? "" : day(t) + " ") + hour(t);
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
    row($("signals"), called(c) + (s.mode ? ", " + s.mode : ""), [{text: "", until: c.los_utc}, show(s.margin_db), show(s.elevation_deg), show(s.azimuth_deg),
      show(s.doppler_hz === null ? null : s.doppler_hz / 1000, 2), show(s.received_power_dbm), show(s.eb_n0_db), show(s.c_n0_dbhz), show(s.range_km, 0)]);
    for (const n of s.notes) $("signal-notes").append(make("li", called(c) + ": " + n));
  }
  headline(byID);
  if (!state.signals.length) row($("signals"), "no contact is under way", []);
  const list = state.next.map(c => c.id).join() + state.generation + chosen + day(state.now_utc);
  if (list !== shownNext) {
    const had = document.activeElement?.dataset?.contact;
    shownNext = list;
    $("next").replaceChildren();
    $("none").hidden = state.next.length > 0;
    for (const c of state.next) {
      const b = make("button", called(c), {type: "button", "data-contact": c.id, "aria-pressed": c.id === chosen});
      b.addEventListener("click", () => choose(c.id));
      const tr = row($("next"), b, [{text: "", until: c.aos_utc}, dated(c.aos_utc), dated(c.los_utc), show(c.max_elevation_deg), show(c.aos_azimuth_deg, 0) + ", " + show(c.los_azimuth_deg, 0)]);
      if (c.id === chosen) tr.className = "chosen";
      if (c.id === had) b.focus();
    }
  }
  $("craft").replaceChildren();
  for (const c of state.spacecraft)
    row($("craft"), c.name, [show(c.latitude_deg), show(c.longitude_deg), show(c.radius_km, 0), c.light || "–", stamp(c.element_epoch_utc), show(c.element_age_days)]);
  if (!chosen && state.next.length) choose((state.next.find(c => c.transmitter) || state.next[0]).id);
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
    $("chosen-facts").textContent = `${stamp(d.aos_utc)} to ${hour(d.los_utc)} UTC` + (d.mode ? `, mode ${d.mode}, ${volume(d.bytes)}` : "") + ".";
    $("mode").replaceChildren(make("option", "the one that brings most", {value: ""}), ...d.modes.map(m => make("option", m, {value: m})));
    const has = {dish_m: d.dish_m, power_w: d.power_w, least_elevation_deg: d.minimum_elevation_deg, pointing_error_deg: d.pointing_error_deg, exceeded_percent: d.exceeded_percent};
    for (const n of numbers) {
      $(n).placeholder = has[n] === null ? "" : String(Number(has[n].toPrecision(4)));
      $(n).disabled = has[n] === null;
      $(n).value = changes[n] ?? "";
    }
    $("mode").value = d.modes.includes(changes.mode) ? changes.mode : "";
    $("chosen-csv").href = "/api/csv/contacts/" + encodeURIComponent(d.id);
    $("chosen-lines").href = $("chosen-csv").href + "/lines";
    $("chosen-json").href = "/api/contacts/" + encodeURIComponent(d.id);
    shownNext = "";
    fill();
    still();
    map();
    second();
    $("answer").hidden = $("keep").hidden = true;
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
    $("answer").hidden = $("keep").hidden = false;
    $("save").hidden = !state.can_save;
    $("kept").textContent = "";
    $("take").href = "/api/scenario?" + new URLSearchParams({contact: chosen, ...changes});
    $("share").href = location.href;
    $("outcomes").replaceChildren();
    for (const [head, o] of [["as in the scenario", a.before], ["with the changes", a.after]])
      row($("outcomes"), head, o.used ? [o.mode || "–", show(o.seconds, 0), show(o.least_margin_db), show(o.greatest_margin_db), volume(o.bytes)] : ["never that high", "0", "–", "–", "0 B"]);
  } catch (e) {
    $("answer").hidden = $("keep").hidden = true;
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
$("save").addEventListener("submit", async e => {
  e.preventDefault();
  try {
    const a = await ask("/api/scenarios", {method: "POST", headers: {"Content-Type": "application/json", "Slantwise-Save-Key": saveKey},
      body: JSON.stringify({name: $("save-name").value, question: {contact: chosen, ...changes}})});
    $("kept").textContent = `Written as ${a.file} in the folder of the scenario; slantwise check --scenario lists what it assumes.`;
  } catch (e) {
    $("kept").textContent = "Not written: " + e.message + ".";
  }
});
addEventListener("hashchange", recall);
$("what-if").addEventListener("reset", () => { changes = {}; $("answer").hidden = $("keep").hidden = true; $("refused").textContent = ""; remember(); });

// headline says first what matters first: what is under way, or what comes next.
function headline(byID) {
  const line = $("headline"), parts = [];
  const until = t => { const e = make("b", ""); e.dataset.until = t; return e; };
  for (const s of state.signals) {
    const c = byID[s.id];
    parts.push([make("b", called(c)), `: azimuth ${show(s.azimuth_deg)}°, elevation ${show(s.elevation_deg)}°` + (s.margin_db === null ? "" : `, margin ${show(s.margin_db)} dB`) + ", ends in ", until(c.los_utc), ". "]);
  }
  const next = state.next.find(c => !state.signals.some(s => s.id === c.id));
  if (next) parts.push(["Next: ", make("b", called(next)), " in ", until(next.aos_utc), "."]);
  line.replaceChildren(...parts.flat());
}

// refoot brings what the numbers stand on after the files have changed.
async function refoot() {
  try {
    const r = await fetch("/foot");
    if (r.ok) $("foot").replaceChildren(...new DOMParser().parseFromString(await r.text(), "text/html").body.childNodes);
  } catch { /* the stream tells that the program does not answer */ }
}

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
let source = null;
function heardState(e) {
  const first = !state;
  state = JSON.parse(e.data);
  heard = performance.now();
  if ($("link").textContent) $("link").textContent = "";
  if (first) still();
  if (first) recall(); // before the first contact is chosen, which takes the address
  fill();
  map();
  if (!first && generation !== state.generation) {
    shownNext = "";
    if (chosen) choose(chosen);
    refoot();
  }
  generation = state.generation;
  second();
}
// A browser has few connections to one program: a page that nobody looks at gives its own back.
function listen() {
  if (document.hidden) {
    source?.close();
    source = null;
    return;
  }
  if (source) return;
  source = new EventSource("/events");
  source.addEventListener("state", heardState);
  source.addEventListener("error", () => {
    $("link").textContent = "The program does not answer; what stands here grows old. Trying again.";
    if (source?.readyState === EventSource.CLOSED) { // it was refused, which the browser does not try again
      source = null;
      setTimeout(listen, 5000);
    }
  });
}
document.addEventListener("visibilitychange", listen);
listen();
setInterval(second, 500);
