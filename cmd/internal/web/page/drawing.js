"use strict";

// The map: longitude is x, latitude upwards is -y. What stands still is drawn once for a
// contact, what moves with each state.
const across = (lat, lon) => lon.map((v, i) => [v, -lat[i]]);
// broken draws a line over the map's edge on both sides of it.
function broken(points) {
  let d = "";
  points.forEach((p, i) => {
    const before = points[i - 1];
    if (!before) { d += `M${p[0].toFixed(1)} ${p[1].toFixed(1)}`; return; }
    const by = ((p[0] - before[0] + 540) % 360) - 180;
    if (Math.abs(before[0] + by) > 180) {
      const side = by > 0 ? 180 : -180, share = by ? (side - before[0]) / by : 0, y = before[1] + share * (p[1] - before[1]);
      d += `L${side} ${y.toFixed(1)}M${-side} ${y.toFixed(1)}`;
    }
    d += `L${p[0].toFixed(1)} ${p[1].toFixed(1)}`;
  });
  return d;
}
// night is where the Sun stands below the horizon: the edge over all longitudes, closed
// along the pole that has the night.
function night(lat, lon) {
  const rad = Math.PI / 180, tilt = Math.abs(lat) < .01 ? (lat < 0 ? -.01 : .01) : lat, pole = tilt > 0 ? 90 : -90;
  let d = `M-180 ${pole}`;
  for (let x = -180; x <= 180; x += 3) d += `L${x} ${(Math.atan(Math.cos((x - lon) * rad) / Math.tan(tilt * rad)) / rad).toFixed(2)}`;
  return d + `L180 ${pole}z`;
}
function still() {
  const m = $("map-still");
  m.replaceChildren();
  for (let lon = -150; lon < 180; lon += 30) draw(m, "line", {class: "grid", x1: lon, x2: lon, y1: -90, y2: 90});
  for (let lat = -60; lat < 90; lat += 30) draw(m, "line", {class: "grid", x1: -180, x2: 180, y1: -lat, y2: -lat});
  if (!detail) return;
  const closed = {latitude_deg: [...detail.circle.latitude_deg, detail.circle.latitude_deg[0]], longitude_deg: [...detail.circle.longitude_deg, detail.circle.longitude_deg[0]]};
  draw(m, "path", {class: "reach", d: broken(across(closed.latitude_deg, closed.longitude_deg))});
  for (const l of [detail.before, detail.after]) draw(m, "path", {class: "beside", d: broken(across(l.latitude_deg, l.longitude_deg))});
  draw(m, "path", {class: "track", d: broken(across(detail.latitude_deg, detail.longitude_deg))});
}
function map() {
  const m = $("map-moving");
  m.replaceChildren();
  $("map-dark").setAttribute("d", night(state.sun_latitude_deg, state.sun_longitude_deg));
  draw(m, "circle", {class: "sun", cx: state.sun_longitude_deg, cy: -state.sun_latitude_deg, r: 4});
  draw(m, "circle", {class: "middle", cx: state.sun_longitude_deg, cy: -state.sun_latitude_deg, r: .8});
  const mark = (lon, lat, below, name) => draw(m, "text", {x: lon > 130 ? lon - 3 : lon + 3, y: below - lat, "text-anchor": lon > 130 ? "end" : "start"}, name);
  for (const s of state.stations) {
    draw(m, "path", {class: "site", d: `M${s.longitude_deg - 3} ${2.5 - s.latitude_deg}h6l-3-5z`});
    mark(s.longitude_deg, s.latitude_deg, s.latitude_deg < -80 ? -4 : 8, s.name);
  }
  for (const c of state.spacecraft) {
    if (c.latitude_deg === null) continue;
    draw(m, "circle", {class: "dot" + (c.light === "sun" ? " lit" : ""), cx: c.longitude_deg, cy: -c.latitude_deg, r: 3});
    mark(c.longitude_deg, c.latitude_deg, c.latitude_deg > 80 ? 8 : -4, c.name);
  }
  const is = (v, plus, minus) => Math.abs(v).toFixed(0) + "° " + (v < 0 ? minus : plus);
  $("map-text").textContent = "Longitude to the right, latitude upwards, a line every 30 degrees. Triangles: stations; circles: spacecraft, filled in sunlight" +
    `; ringed dot: under the Sun, ${is(state.sun_latitude_deg, "north", "south")}, ${is(state.sun_longitude_deg, "east", "west")}; hatched: night.` +
    (detail ? ` ${called(detail)}: thick line, the contact; dashed, before and after; dotted ring, where the station sees it.` : "");
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
  const rim = detail.horizon.azimuth_deg.map((az, i) => polar(az, Math.max(0, detail.horizon.elevation_deg[i])));
  if (rim.length) draw(sky, "path", {class: "limit", d: path(rim) + "z"});
  for (const b of detail.sky) {
    if (!(b.elevation_deg > 0)) continue;
    const [x, y] = polar(b.azimuth_deg, b.elevation_deg);
    if (b.name === "Sun") draw(sky, "circle", {class: "sun", cx: x, cy: y, r: 5});
    draw(sky, "circle", {class: b.name === "Sun" ? "middle" : "moon", cx: x, cy: y, r: b.name === "Sun" ? 1 : 4});
    draw(sky, "text", {x: x > 60 ? x - 7 : x + 7, y: y + 3, "text-anchor": x > 60 ? "end" : "start"}, b.name);
  }
  draw(sky, "path", {class: "track", d: path(detail.azimuth_deg.map((az, i) => polar(az, detail.elevation_deg[i])))});
  if (under) {
    const [x, y] = polar(at(detail.azimuth_deg, s), at(detail.elevation_deg, s));
    draw(sky, "circle", {class: "dot lit", cx: x, cy: y, r: 5});
  }
  $("sky-text").textContent = `North up, east to the right, horizon at the rim. From azimuth ${show(detail.aos_azimuth_deg, 0)}° up to ${show(detail.max_elevation_deg)}° and down at ${show(detail.los_azimuth_deg, 0)}°.` + " Dashed: the least elevation that sees the sky." + (under ? ` The dot is where it stands now: azimuth ${show(at(detail.azimuth_deg, s))}°, elevation ${show(at(detail.elevation_deg, s))}°.` : "") +
    detail.sky.map(b => ` ${b.name} ${b.elevation_deg > 0 ? "at " + show(b.azimuth_deg, 0) + "°, " + show(b.elevation_deg, 0) + "° high" : "below the horizon"}`).join(";") + (detail.sky.length ? " at the culmination." : "");
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

