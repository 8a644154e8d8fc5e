// What the tests measure in a page. The file is one expression: an object of functions,
// each of which returns a list of faults in words, empty where all is well. Numbers in
// brackets are success criteria of WCAG 2.1.
(() => {
  'use strict';

  const shown = e => e.checkVisibility({ visibilityProperty: true, opacityProperty: true });
  // called is what a fault names an element by.
  function called(e) {
    const words = (e.textContent || e.getAttribute('aria-label') || '').trim().replace(/\s+/g, ' ').slice(0, 40);
    const kind = e.id ? '#' + e.id : e.getAttribute('class') ? '.' + e.getAttribute('class').split(' ')[0] : '';
    return `<${e.localName}${kind}> "${words}"`;
  }
  // beside: pushed out of the page for those who read it aloud.
  const beside = e => e.getBoundingClientRect().right <= 0;

  // Colours are [red, green, blue, alpha], 0 to 1.
  function colour(text) {
    const m = /^rgba?\(([^)]*)\)$/.exec(text);
    if (!m) { return null; }
    const v = m[1].split(/[ ,/]+/).map(Number);
    return [v[0] / 255, v[1] / 255, v[2] / 255, v.length > 3 ? v[3] : 1];
  }
  const over = (a, b) => [0, 1, 2].map(i => a[i] * a[3] + b[i] * (1 - a[3])).concat(1);
  function luminance(c) {
    const l = c.slice(0, 3).map(v => v <= 0.03928 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4);
    return 0.2126 * l[0] + 0.7152 * l[1] + 0.0722 * l[2];
  }
  function ratio(a, b) {
    const x = luminance(a), y = luminance(b);
    return (Math.max(x, y) + 0.05) / (Math.min(x, y) + 0.05);
  }

  // ground is the colour that stands behind an element of HTML.
  function ground(e) {
    const layers = [];
    for (; e; e = e.parentElement) {
      const c = colour(getComputedStyle(e).backgroundColor);
      if (c && c[3] > 0) { layers.push(c); if (c[3] === 1) { break; } }
    }
    return layers.reverse().reduce((below, c) => over(c, below), [1, 1, 1, 1]);
  }

  // painted is the colour that stands behind the middle of a text of a drawing: what is
  // painted before it, and then its own outline, where that is painted first.
  function painted(text) {
    const svg = text.ownerSVGElement, box = text.getBoundingClientRect();
    let root = svg;
    while (root.ownerSVGElement) { root = root.ownerSVGElement; }
    let c = ground(root);
    for (const e of root.querySelectorAll('path, rect, circle, ellipse, polygon')) {
      if (!(e.compareDocumentPosition(text) & Node.DOCUMENT_POSITION_FOLLOWING)) { break; }
      const b = e.getBoundingClientRect();
      if (b.left > box.right || b.right < box.left || b.top > box.bottom || b.bottom < box.top || e.closest('defs, clipPath, pattern, mask, symbol') || !e.checkVisibility()) { continue; }
      const s = getComputedStyle(e), fill = colour(s.fill), matrix = e.getScreenCTM();
      if (!fill || !matrix) { continue; }
      const at = new DOMPoint(box.x + box.width / 2, box.y + box.height / 2).matrixTransform(matrix.inverse());
      if (!e.isPointInFill(at)) { continue; }
      fill[3] *= Number(s.fillOpacity) * Number(s.opacity);
      c = over(fill, c);
    }
    const s = getComputedStyle(text), halo = colour(s.stroke);
    return halo && s.paintOrder.startsWith('stroke') && parseFloat(s.strokeWidth) >= 2 ? over(halo, c) : c;
  }

  // Text has 4.5 to 1 on what it stands on (1.4.3), whatever its size. The first rows
  // stand for the others of a table that is folded away.
  function contrast() {
    const faults = new Map(), done = new Set();
    let measured = 0;
    const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
    while (walk.nextNode()) {
      const e = walk.currentNode.parentElement;
      if (!walk.currentNode.data.trim() || done.has(e) || /^(script|style|title|desc|option)$/.test(e.localName) || !shown(e) || beside(e) || e.closest('details tr:nth-child(n+4)')) { continue; }
      done.add(e);
      const drawn = e instanceof SVGElement, s = getComputedStyle(e);
      let ink = colour(drawn ? s.fill : s.color);
      if (!ink) { faults.set(called(e), `${called(e)}: its colour ${drawn ? s.fill : s.color} is not understood`); continue; }
      const below = drawn ? painted(e) : ground(e);
      if (drawn) { ink[3] *= Number(s.fillOpacity); }
      for (let p = e; p; p = p.parentElement) { ink[3] *= Number(getComputedStyle(p).opacity); }
      const got = ratio(over(ink, below), below);
      measured++;
      if (got < 4.5) { faults.set(s.color + s.fill + got, `${called(e)}: contrast ${got.toFixed(2)}, want 4.5`); }
    }
    return measured ? [...faults.values()] : ['no text was measured'];
  }

  // The page is no wider than its screen (1.4.10). What scrolls by itself may be.
  function overflow() {
    const wide = document.documentElement.scrollWidth, have = document.documentElement.clientWidth;
    if (wide <= have) { return []; }
    const out = e => Math.max(e.getBoundingClientRect().right, e.getBoundingClientRect().left + e.scrollWidth) > have + 0.5;
    const who = [...document.body.querySelectorAll('*')].filter(e => shown(e) && out(e) && !e.parentElement.closest('.scroll, svg') && (e.localName === 'svg' || ![...e.children].some(out))).slice(0, 4).map(called);
    return [`the page is ${wide} px wide on ${have} px: ${who.join(', ')}`];
  }

  // One h1, and no level left out on the way down (1.3.1, 2.4.6); title and language
  // (2.4.2, 3.1.1); one main part to skip to (2.4.1).
  function outline() {
    const faults = [], heads = [...document.querySelectorAll('h1, h2, h3, h4, h5, h6')].filter(shown);
    let last = 0;
    for (const h of heads) {
      const level = Number(h.localName[1]);
      if (level > last + 1) { faults.push(`${called(h)} follows a heading of level ${last}`); }
      if (!h.textContent.trim()) { faults.push(`a heading of level ${level} is empty`); }
      last = level;
    }
    const count = q => document.querySelectorAll(q).length;
    if (heads.filter(h => h.localName === 'h1').length !== 1) { faults.push(`${count('h1')} headings of level 1`); }
    if (!document.documentElement.lang) { faults.push('no language is stated'); }
    if (!document.title.trim()) { faults.push('no title'); }
    if (count('main') !== 1) { faults.push(`${count('main')} main parts`); }
    const ids = [...document.querySelectorAll('[id]')].map(e => e.id);
    ids.filter((v, i) => ids.indexOf(v) !== i).forEach(v => faults.push(`the id ${v} stands twice`));
    for (const a of document.querySelectorAll('a[href^="#"]')) {
      if (a.getAttribute('href').length > 1 && !document.getElementById(a.getAttribute('href').slice(1))) { faults.push(`${called(a)} leads nowhere`); }
    }
    for (const e of document.querySelectorAll('[aria-labelledby], [aria-describedby], label[for]')) {
      for (const at of ['aria-labelledby', 'aria-describedby', 'for']) {
        for (const id of (e.getAttribute(at) || '').split(' ').filter(v => v)) {
          if (!document.getElementById(id)) { faults.push(`${called(e)}: ${at} names ${id}, which is not there`); }
        }
      }
    }
    return faults;
  }

  const charts = () => [...document.querySelectorAll('.drawing, svg')].filter(e => shown(e) && !e.closest('[aria-hidden=true]') &&
    !e.parentElement.closest('svg, .drawing'));

  // Every chart, control, link, table and place that scrolls has a name (1.1.1, 4.1.2),
  // and a chart's numbers stand in a table beside it or in a file that a link leads to.
  function names() {
    const faults = [], files = document.querySelector('a[href*=".csv"], a[href*=".json"], a[href^="data:text/csv"], a[href^="/api/"]');
    for (const c of charts()) {
      // A drawing's own element may hold the name, or the one picture inside it.
      const named = [c, ...c.querySelectorAll('svg')].find(e => e.computedName);
      if (!named) { faults.push(`${called(c)}: the chart has no name`); }
      else if (!/^(img|image|graphics-document|group|region|figure)$/.test(named.computedRole)) { faults.push(`${called(c)}: the chart's role is ${named.computedRole}`); }
      const around = c.closest('figure, section');
      if (!files && !(around && around.querySelector('table'))) { faults.push(`${called(c)}: neither a table nor a file holds its numbers`); }
    }
    for (const e of document.querySelectorAll('a[href], button, input, select, textarea, summary, output, table, [role=region], [role=group]')) {
      if (shown(e) && !e.computedName) { faults.push(`${called(e)} has no name`); }
    }
    for (const t of document.querySelectorAll('table')) {
      if (!t.querySelector('th[scope]')) { faults.push(`${called(t)}: no head names a row or a column`); }
    }
    return faults;
  }

  // drawn counts charts, and tells of those with nothing in them.
  function drawn() {
    const faults = [];
    for (const c of charts()) {
      const marks = [...c.querySelectorAll('path, rect, circle, line, polyline, polygon')].filter(e => {
        const b = e.getBoundingClientRect();
        return b.width + b.height > 0 && shown(e);
      });
      const ink = [...c.querySelectorAll('canvas')].some(k => k.getContext('2d').getImageData(0, 0, k.width, k.height).data.some(v => v > 0));
      const line = [...c.querySelectorAll('polyline')].some(l => l.points.numberOfItems > 2);
      if (marks.length < 3 && !line && !ink) { faults.push(`${called(c)}: ${marks.length} marks`); }
    }
    return faults;
  }

  const stops = () => [...document.querySelectorAll('a[href], button, input, select, textarea, summary, [tabindex="0"]')].filter(e => shown(e) && !e.disabled);

  // lit tells whether an element shows that it has the focus.
  function lit(e) {
    const s = getComputedStyle(e), inner = e instanceof SVGElement && e.querySelector('rect, circle, path');
    return s.outlineStyle !== 'none' && parseFloat(s.outlineWidth) >= 2 || inner && parseFloat(getComputedStyle(inner).strokeWidth) >= 2;
  }

  // watch writes down where the focus goes, and returns how many stops there are.
  let way = [];
  function watch() {
    way = [];
    document.activeElement.blur();
    document.addEventListener('focusin', e => {
      const t = e.target, b = t.getBoundingClientRect();
      const x = Math.min(innerWidth - 1, Math.max(0, b.x + b.width / 2)), y = b.y + Math.min(b.height / 2, 40);
      const top = document.elementFromPoint(x, y);
      way.push({
        e: t, box: [b.left, b.top + scrollY, b.right, b.bottom + scrollY],
        visible: lit(t),
        covered: y < 0 || y >= innerHeight || !top || !(t.contains(top) || top.contains(t) || top.tagName === 'svg')
      });
    });
    return stops().length;
  }

  // walked judges the way of the Tab key since watch: every stop, in the order in which
  // they stand (2.1.1, 2.4.3), seen (2.4.7), not under something else, and then out of
  // the page again (2.1.2).
  function walked() {
    const faults = [], want = stops(), got = way.filter(w => want.includes(w.e));
    want.forEach((e, i) => { if (!got.some(w => w.e === e)) { faults.push(`${called(e)}, stop ${i + 1} of ${want.length}, was not reached`); } });
    const order = got.map(w => want.indexOf(w.e));
    if (got.length && order[0] !== 0) { faults.push(`the way begins at ${called(got[0].e)}`); }
    order.forEach((v, i) => { if (i && v < order[i - 1] && v !== 0) { faults.push(`${called(got[i].e)} comes after ${called(got[i - 1].e)}`); } });
    got.forEach((w, i) => {
      // The first key may come before the browser knows that keys are used.
      if (!w.visible) { w.e.focus({ focusVisible: true }); }
      if (!w.visible && !lit(w.e)) { faults.push(`${called(w.e)}: its focus cannot be seen`); }
      if (w.covered) { faults.push(`${called(w.e)}: something covers it, or it is not on the screen`); }
      const last = i && got[i - 1].box;
      // Up and not to the right of the stop before is against the order of reading.
      if (last && order[i] > order[i - 1] && w.box[3] <= last[1] && w.box[0] < last[2] - 1 && !(w.e instanceof SVGElement)) { faults.push(`${called(w.e)} stands above ${called(got[i - 1].e)}, which the Tab key reaches before it`); }
    });
    return faults;
  }

  const fold = open => document.querySelectorAll('details').forEach(d => { d.open = open; });

  return window.measures || (window.measures = { contrast, overflow, outline, names, drawn, watch, walked, fold, charts: () => charts().length });
})()
