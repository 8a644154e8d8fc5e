// Draws the charts of a report page and moves one cursor through all of them. The
// numbers stand in the page without it.
(function () {
  'use strict';

  var page = document.documentElement;
  var holder = document.getElementById('drawings');
  var data = holder ? JSON.parse(holder.textContent) : { drawings: [], offsets: null };
  var charts = []; // {spec, box, chart, hair}

  function two(n) { return (n < 10 ? '0' : '') + n; }

  // clock writes seconds since midnight as a time of the day.
  function clock(s, withSeconds) {
    var t = ((Math.round(s) % 86400) + 86400) % 86400;
    var text = two(Math.floor(t / 3600)) + ':' + two(Math.floor(t / 60) % 60);
    return withSeconds ? text + ':' + two(t % 60) : text;
  }

  // day writes the date that lies a number of seconds after midnight of a date.
  function day(date, s) {
    return new Date(Date.parse(date + 'T00:00:00Z') + Math.floor(s / 86400) * 86400000).toISOString().slice(5, 10);
  }

  function number(v, decimals) {
    if (v === null || v === undefined || typeof v !== 'number') { return '–'; }
    return v.toFixed(decimals).replace('-', '−');
  }

  function tone(name) { return getComputedStyle(page).getPropertyValue(name).trim(); }

  function palette() {
    return {
      ink: tone('--ink'), soft: tone('--soft'), rule: tone('--rule'), paper: tone('--paper'),
      lines: [tone('--line-1'), tone('--line-2')], hatch: tone('--hatch')
    };
  }

  // tile returns a pattern that marks an area without colour.
  function tile(size, colour, paint) {
    var c = document.createElement('canvas');
    c.width = c.height = size;
    var g = c.getContext('2d');
    g.strokeStyle = g.fillStyle = colour;
    paint(g);
    return { image: c, repeat: 'repeat' };
  }

  function strokes(g) {
    [[-2, 2], [-2, 10], [6, 10]].forEach(function (p) { g.moveTo(p[0], p[1]); g.lineTo(p[0] + 12, p[1] - 12); });
    g.stroke();
  }

  function dots(g) { g.fillRect(2, 2, 2, 2); }

  function styled(axis, p) {
    axis.axisLine = { show: true, lineStyle: { color: p.soft } };
    axis.axisTick = { show: true, lineStyle: { color: p.soft } };
    axis.splitLine = { lineStyle: { color: p.rule } };
    axis.axisLabel = axis.axisLabel || {};
    axis.axisLabel.color = p.ink;
    axis.axisLabel.fontSize = 11;
    return axis;
  }

  function timeLabels(axis, spec) {
    var length = spec.axis.to - spec.axis.from;
    axis.axisLabel = {
      hideOverlap: true, showMinLabel: false, showMaxLabel: false,
      formatter: function (s) {
        if (length > 86400) { return clock(s) === '00:00' ? day(spec.axis.date, s) : clock(s); }
        return clock(s, spec.axis.step < 60);
      }
    };
    axis.nameLocation = 'middle';
    axis.nameGap = 26;
    if (length > 86400) { axis.name = 'UTC, month-day at midnight'; }
  }

  function heading(text, side, p) {
    var t = { text: text, top: 2, padding: 0, textStyle: { fontSize: 12, fontWeight: 'normal', color: p.ink } };
    t[side] = 0;
    return t;
  }

  // forCurve is for lines over a quantity that is not time.
  function forCurve(o, spec, p, width) {
    var x = o.xAxis[0];
    x.axisLabel = { hideOverlap: true, formatter: function (v) { return String(v).replace('-', '−'); } };
    x.nameLocation = 'middle';
    x.nameGap = 26;
    forLines(o, p);
    o.yAxis[0].axisLine.onZero = false;
    if (spec.many) { forMany(o, p); }
    underLegend(o, width);
  }

  function forTime(o, spec, p, width) {
    timeLabels(o.xAxis[0], spec);
    forLines(o, p);
    if (spec.many) { forMany(o, p); }
    underLegend(o, width);
    if (spec.marks) { marked(o, spec, p); }
    if (o.yAxis[0].type === 'log') { positive(o); }
  }

  // forMany is for charts with many lines: the sum in ink, its parts in two colours with
  // a symbol of their own on some of their points.
  function forMany(o, p) {
    o.series.forEach(function (s, k) {
      var colour = k ? p.lines[k % 2] : p.ink;
      s.lineStyle.color = colour;
      s.lineStyle.width = k ? 1.5 : 2.5;
      s.itemStyle = hollow(s, colour, p) || { color: colour };
      if (s.symbol === 'none') { return; }
      s.symbolSize = 8;
      var step = Math.max(1, Math.round(s.data.length / 9));
      s.data = s.data.map(function (q, i) {
        return (i + k * 2) % step === Math.floor(step / 2) ? { value: q } : { value: q, symbol: 'none' };
      });
    });
    o.legend.itemGap = 10;
    o.legend.itemStyle = {};
    o.legend.data = o.series.map(function (s) { return s.symbol === 'none' ? { name: s.name, itemStyle: { opacity: 0 } } : s.name; });
  }

  // hollow makes an open symbol of the page's colour inside, which the library has white.
  function hollow(s, colour, p) {
    if (!s.symbol || s.symbol.indexOf('empty') !== 0) { return null; }
    s.symbol = s.symbol.charAt(5).toLowerCase() + s.symbol.slice(6);
    return { color: p.paper, borderColor: colour, borderWidth: 2 };
  }

  // positive leaves gaps where a logarithmic scale has no place.
  function positive(o) {
    o.series.forEach(function (s) {
      s.data = s.data.map(function (q) { return (q.value || q)[1] > 0 ? q : [(q.value || q)[0], null]; });
    });
  }

  // underLegend leaves room for as many rows as the names of the lines need.
  function underLegend(o, width) {
    if (!o.legend.show) { return; }
    var x = 0, rows = 1, g = document.createElement('canvas').getContext('2d');
    g.font = '12px ' + o.textStyle.fontFamily;
    o.series.forEach(function (s) {
      var w = o.legend.itemWidth + 5 + g.measureText(s.name).width;
      if (x > 0 && x + w > width) { rows += 1; x = 0; }
      x += w + o.legend.itemGap;
    });
    o.grid.top = 24 + rows * (14 + o.legend.itemGap);
  }

  // marked hatches the spans in which something is in the beam, with a word in them.
  function marked(o, spec, p) {
    var s = o.series[o.series.length - 1];
    s.markArea = {
      silent: true, itemStyle: { color: spec.bare ? 'transparent' : tile(6, p.soft, dots), borderColor: p.soft, borderWidth: 1 }, label: { color: p.ink, fontSize: 11, position: 'top', distance: 3 },
      data: spec.marks.map(function (m) { return [{ xAxis: m.from, name: m.label }, { xAxis: m.to }]; })
    };
  }

  function forLines(o, p) {
    var legend = o.legend && o.legend.show;
    o.title = o.yAxis.map(function (y, k) { return heading(y.name, k ? 'right' : 'left', p); });
    o.yAxis.forEach(function (y) {
      y.name = '';
      y.axisLabel = { formatter: function (v) { return String(v).replace('-', '−'); } };
      styled(y, p);
    });
    if (o.yAxis[1]) { o.yAxis[1].splitLine = { show: false }; }
    styled(o.xAxis[0], p);
    o.xAxis[0].splitLine = { show: false };
    o.xAxis[0].axisLine.onZero = false;
    o.legend = { show: legend, left: 0, top: 21, padding: 0, itemWidth: 34, itemGap: 16, itemStyle: { opacity: 0 }, textStyle: { color: p.ink, fontSize: 12 } };
    o.grid = { left: 50, right: o.yAxis[1] ? 50 : 22, top: 28, bottom: 44 };
    o.series.forEach(function (s) {
      if (s.markArea) { s.markArea.silent = true; s.markArea.itemStyle = { color: tile(8, p.hatch, strokes) }; }
      s.silent = true;
    });
  }

  function forSky(o, spec, p) {
    styled(o.angleAxis, p);
    styled(o.radiusAxis, p);
    var ends = o.series[o.series.length - 1].data.map(function (e) { return e.value[1]; });
    o.angleAxis.axisLabel.formatter = function (a) {
      var letter = { 0: 'N', 90: 'E', 180: 'S', 270: 'W', 360: ' ' }[a];
      var near = [ends[0], ends[2]].some(function (e) { return Math.abs((e - a + 540) % 360 - 180) < 20; });
      return letter || (near ? '' : a + '°'); // AOS and LOS have their labels there
    };
    o.radiusAxis.axisLabel.formatter = function (e) { return e === 0 ? '' : e + '°'; };
    o.radiusAxis.axisLine.show = false;
    o.radiusAxis.axisTick.show = false;
    o.radiusAxis.axisLabel.color = p.soft;
    o.polar = { center: ['50%', '54%'], radius: '74%' };
    o.legend.left = 0;
    o.legend.top = 2;
    o.legend.padding = 0;
    o.legend.itemWidth = 34;
    o.legend.itemStyle = { opacity: 0 };
    o.legend.textStyle = { color: p.ink, fontSize: 12 };
    o.series.forEach(function (s) {
      s.silent = true;
      if (s.areaStyle) { s.areaStyle.color = p.soft; s.areaStyle.opacity = 0.18; s.lineStyle.width = 1; }
      if (s.type === 'scatter') {
        s.itemStyle = { color: p.lines[0], borderColor: p.paper, borderWidth: 1 };
        s.data.forEach(function (q) {
          var open = hollow(q, p.lines[0], p);
          if (open) { q.itemStyle = open; }
        });
        s.label.color = p.ink;
        s.label.fontSize = 11;
        s.label.textBorderColor = p.paper;
        s.label.textBorderWidth = 3;
        s.label.lineHeight = 14;
        s.itemStyle.opacity = 1;
      }
    });
  }

  function forOverview(o, spec, p) {
    timeLabels(o.xAxis[0], spec);
    styled(o.xAxis[0], p);
    styled(o.yAxis[0], p);
    o.yAxis[0].splitLine = { show: true, lineStyle: { color: p.rule } };
    o.yAxis[0].axisLabel.width = window.innerWidth < 600 ? 84 : 160;
    o.yAxis[0].axisLabel.overflow = 'truncate';
    o.legend = { show: true, left: 0, top: 2, padding: 0, itemWidth: 12, itemHeight: 11, itemGap: 16, textStyle: { color: p.ink, fontSize: 12 } };
    o.grid = { left: window.innerWidth < 600 ? 94 : 170, right: 14, top: window.innerWidth < 600 ? 62 : 36, bottom: 44 };
    o.tooltip = {
      show: true, trigger: 'item', renderMode: 'richText', confine: true,
      formatter: function (q) { return spec.names[q.value[2]]; }
    };
    o.series.forEach(function (s, k) {
      var colour = p.lines[k % 2];
      if (s.symbol === 'emptyTriangle') { // nothing to decide there: behind the others
        colour = p.soft;
        s.symbolSize = 7;
        s.z = 1;
      }
      var hollow = s.symbol.indexOf('empty') === 0;
      s.symbol = s.symbol.replace('empty', '').toLowerCase();
      s.itemStyle = { color: hollow ? 'transparent' : colour, borderColor: colour, borderWidth: 1.5, opacity: 1 };
    });
  }

  function finished(spec, p, width) {
    var o = JSON.parse(JSON.stringify(spec.option));
    o.color = p.lines;
    o.backgroundColor = 'transparent';
    o.textStyle = { fontFamily: getComputedStyle(document.body).fontFamily, color: p.ink };
    if (o.xAxis) { o.xAxis[0].nameTextStyle = { color: p.ink, fontSize: 12 }; }
    ({ time: forTime, curve: forCurve, sky: forSky, overview: forOverview })[spec.kind](o, spec, p, width);
    return o;
  }

  // draw sets up all charts; size fixes their width on paper.
  function draw(size) {
    var p = palette();
    charts.forEach(function (c) {
      if (c.chart) { c.chart.dispose(); }
      // Lines stay sharp as vectors; hundreds of symbols are drawn several times faster as pixels.
      var opts = { renderer: c.spec.names && c.spec.names.length > 300 ? 'canvas' : 'svg' };
      if (size) {
        opts.width = c.spec.kind === 'overview' ? size.wide : size.width;
        opts.height = c.spec.kind === 'sky' ? size.sky : c.spec.many ? size.many : c.spec.kind === 'overview' ? c.box.clientHeight : size.height;
      }
      c.chart = window.echarts.init(c.box, null, opts);
      var o = finished(c.spec, p, opts.width || c.box.clientWidth);
      c.top = o.grid && o.grid.top;
      c.chart.setOption(o);
      c.box.appendChild(c.hair);
      if (c.spec.links) {
        c.chart.on('click', function (q) { window.location.href = c.spec.links[q.value[2]]; });
      }
    });
    place();
  }

  // The cursor: one sample, shown in every chart and read out in words.
  var at = -1;
  var samples = [];

  function local(s) {
    var o = null;
    (data.offsets || []).forEach(function (z) { if (z.from <= s) { o = z; } });
    return o ? ', ' + instant(s + o.seconds) + ' ' + o.name : '';
  }

  // instant writes a time of the pass, with its day where a pass lasts longer.
  function instant(s) {
    var axis = charts[0].spec.axis || charts[1].spec.axis;
    return (axis.to - axis.from > 86400 ? day(axis.date, s) + ' ' : '') + clock(s, true);
  }

  function place() {
    if (at < 0) { return; }
    charts.forEach(function (c) {
      var q;
      if (c.spec.kind === 'time') {
        q = c.chart.convertToPixel({ xAxisIndex: 0 }, samples[at]);
        c.hair.style.left = q + 'px';
        c.hair.style.top = c.top + 'px';
      } else if (c.spec.kind === 'sky') {
        q = c.chart.convertToPixel({ seriesIndex: 0 }, c.spec.option.series[0].data[at]);
        c.hair.style.left = q[0] + 'px';
        c.hair.style.top = q[1] + 'px';
      }
    });
  }

  function move(index) {
    at = Math.max(0, Math.min(samples.length - 1, index));
    place();
    var slider = document.getElementById('cursor-slider');
    var out = document.getElementById('cursor-reading');
    slider.value = at;
    out.textContent = '';
    var time = instant(samples[at]) + ' UTC' + local(samples[at]);
    var words = [time];
    add(out, 'b', time);
    charts.forEach(function (c) {
      (c.spec.reads || []).forEach(function (r, k) {
        if (c.spec.kind === 'sky' && k === 0) { return; } // the elevation has a chart of its own
        var v = c.spec.option.series[r.series].data[at][1];
        var text = r.label + ' ' + number(v, r.decimals) + ' ' + r.unit;
        words.push(text);
        add(out, 'span', text);
      });
    });
    slider.setAttribute('aria-valuetext', words.join('; '));
  }

  function add(parent, tag, text) {
    var e = document.createElement(tag);
    e.textContent = text;
    parent.appendChild(e);
    parent.appendChild(document.createTextNode(' '));
  }

  function nearest(s) {
    var low = 0, high = samples.length - 1;
    while (high - low > 1) {
      var mid = (low + high) >> 1;
      if (samples[mid] <= s) { low = mid; } else { high = mid; }
    }
    return s - samples[low] < samples[high] - s ? low : high;
  }

  function cursor() {
    var first = charts.filter(function (c) { return c.spec.kind === 'time'; })[0];
    if (!first) { return; }
    samples = first.spec.option.series[0].data.map(function (q) { return q[0]; });
    var slider = document.getElementById('cursor-slider');
    slider.max = samples.length - 1;
    slider.addEventListener('input', function () { move(Number(slider.value)); });
    document.getElementById('cursor').hidden = false;
    charts.forEach(function (c) {
      if (c.spec.kind !== 'time') { return; }
      c.box.addEventListener('pointermove', function (e) {
        var box = c.box.getBoundingClientRect();
        var s = c.chart.convertFromPixel({ xAxisIndex: 0 }, e.clientX - box.left);
        if (isFinite(s)) { move(nearest(s)); }
      });
    });
    move(data.start);
  }

  function watch() {
    var dark = window.matchMedia('(prefers-color-scheme: dark)');
    dark.addEventListener('change', function () { draw(); });
    var width = window.innerWidth;
    window.addEventListener('resize', function () {
      if (page.classList.contains('printing') || width === window.innerWidth) { return; }
      width = window.innerWidth;
      window.requestAnimationFrame(function () { draw(); });
    });
    window.addEventListener('beforeprint', function () {
      page.classList.add('printing');
      draw({ width: 336, height: 205, many: 285, sky: 310, wide: 690 });
    });
    window.addEventListener('afterprint', function () {
      page.classList.remove('printing');
      draw();
    });
  }

  function start() {
    if (!window.echarts) {
      document.querySelectorAll('.figure details').forEach(function (d) { d.open = true; });
      return;
    }
    var missing = document.getElementById('missing');
    if (missing) { missing.hidden = true; }
    page.classList.add('drawn');
    data.drawings.forEach(function (spec) {
      var box = document.getElementById(spec.id);
      var hair = document.createElement('i');
      hair.className = 'hair ' + spec.kind;
      if (spec.kind === 'overview') {
        box.style.height = (spec.option.yAxis[0].data.length * 28 + (window.innerWidth < 600 ? 112 : 90)) + 'px';
      }
      charts.push({ spec: spec, box: box, hair: hair, chart: null });
    });
    draw();
    cursor();
    watch();
  }

  start();
})();
