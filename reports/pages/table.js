// Sorts and filters the index. Without it the table stands in order of time.
(function () {
  'use strict';

  function sorting(table) {
    var heads = table.tHead.rows[0].cells;
    Array.prototype.forEach.call(heads, function (th, column) {
      var button = document.createElement('button');
      button.type = 'button';
      button.textContent = th.textContent;
      th.textContent = '';
      th.appendChild(button);
      button.addEventListener('click', function () {
        order(table, column, th.getAttribute('aria-sort') !== 'ascending');
        document.getElementById('sort-by').value = '';
      });
    });
    // The choice serves where the heads are not shown: time rising, all else falling.
    document.getElementById('sort-by').addEventListener('input', function (e) {
      order(table, Number(e.target.value), e.target.value === '');
    });
  }

  function order(table, column, up) {
    var heads = table.tHead.rows[0].cells;
    Array.prototype.forEach.call(heads, function (h) { h.removeAttribute('aria-sort'); });
    heads[column].setAttribute('aria-sort', up ? 'ascending' : 'descending');
    sort(table, column, heads[column].dataset.sort === 'number', up ? 1 : -1);
  }

  function sort(table, column, numeric, sign) {
    var body = table.tBodies[0];
    var rows = Array.prototype.map.call(body.rows, function (tr, i) {
      var cell = tr.cells[column];
      var key = cell.dataset.v === undefined ? cell.textContent : cell.dataset.v;
      return { tr: tr, i: i, key: numeric ? (key === '' || isNaN(Number(key)) ? null : Number(key)) : key };
    });
    rows.sort(function (a, b) {
      if (a.key === null || b.key === null) { return (a.key === null) - (b.key === null) || a.i - b.i; }
      return (a.key < b.key ? -sign : a.key > b.key ? sign : a.i - b.i);
    });
    var list = document.createDocumentFragment();
    rows.forEach(function (r) { list.appendChild(r.tr); });
    body.appendChild(list);
  }

  function filtering(table) {
    var form = document.getElementById('filters');
    var craft = document.getElementById('filter-spacecraft');
    var station = document.getElementById('filter-station');
    var link = document.getElementById('filter-link');
    var least = document.getElementById('filter-elevation');
    function apply() {
      var shown = 0;
      Array.prototype.forEach.call(table.tBodies[0].rows, function (tr) {
        var state = tr.dataset.link;
        var closes = state === 'throughout' || state === 'partly';
        var keep = (!craft.value || tr.cells[1].textContent === craft.value) &&
          (!station.value || tr.cells[2].textContent === station.value) &&
          (!link || !link.value || link.value === state || (link.value === 'some' && closes)) &&
          (Number(tr.cells[4].textContent) >= Number(least.value || 0));
        tr.hidden = !keep;
        shown += keep ? 1 : 0;
      });
      document.getElementById('shown').textContent = shown + ' of ' + table.tBodies[0].rows.length + ' rows';
    }
    form.hidden = false;
    form.addEventListener('input', apply);
    form.addEventListener('submit', function (e) { e.preventDefault(); });
    apply();
  }

  var table = document.getElementById('pass-table');
  if (table) { sorting(table); filtering(table); }
})();
