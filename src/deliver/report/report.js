"use strict";
(function () {
  var root = document.documentElement;
  var data = JSON.parse(document.getElementById("map-data").textContent);
  var table = document.getElementById("points");
  var body = table.tBodies[0];
  var rows = Array.prototype.slice.call(body.rows);
  var rowOf = {};
  rows.forEach(function (row) { rowOf[row.dataset.number] = row; });

  // Search and filter: every word has to stand in the row, and what is chosen has to be so of the point.
  var search = document.getElementById("search");
  var kind = document.getElementById("filter");
  var count = document.getElementById("count");
  function filter() {
    var words = search.value.toLowerCase().split(/\s+/).filter(Boolean);
    var shown = 0;
    rows.forEach(function (row) {
      var text = row.dataset.search;
      var fits = words.every(function (word) { return text.indexOf(word) >= 0; }) &&
        (!kind.value || row.dataset.is.split(" ").indexOf(kind.value) >= 0);
      row.hidden = !fits;
      if (fits) shown += 1;
    });
    count.textContent = shown + " of " + rows.length + " points";
  }
  rows.forEach(function (row) { row.dataset.search = row.textContent.toLowerCase(); });
  search.addEventListener("input", filter);
  kind.addEventListener("change", filter);
  filter();

  // Sort by a column: numbers as numbers, names as words.
  Array.prototype.forEach.call(table.tHead.rows[0].cells, function (head, column) {
    var button = head.querySelector("button");
    if (!button) return;
    button.addEventListener("click", function () {
      var up = head.getAttribute("aria-sort") === "descending" || (!head.hasAttribute("aria-sort") && column === 0);
      Array.prototype.forEach.call(table.tHead.rows[0].cells, function (other) { other.removeAttribute("aria-sort"); });
      head.setAttribute("aria-sort", up ? "ascending" : "descending");
      var keyed = rows.map(function (row) {
        var text = row.cells[column].textContent.trim();
        return { row: row, text: text, number: parseFloat(text) };
      });
      keyed.sort(function (a, b) {
        var by = isNaN(a.number) || isNaN(b.number) || column === 0 ? a.text.localeCompare(b.text) : a.number - b.number;
        return up ? by : -by;
      });
      keyed.forEach(function (item) { body.appendChild(item.row); });
    });
  });

  // The map: the DEM's own plane, one unit a cell, north up.
  var map = null;
  var chosen = null;
  var marks = {};
  function at(column, row) { return [-row * data.tall, column]; }
  function line(flat) {
    var places = [];
    for (var i = 0; i + 1 < flat.length; i += 2) places.push(at(flat[i], flat[i + 1]));
    return places;
  }
  var bounds = [at(0, data.rows), at(data.columns, 0)];
  var frame = document.getElementById("map");

  // Dots are no larger than lets the ground between them be seen, and grow as the map is drawn larger.
  function dotRadius() {
    var side = Math.pow(2, map.getZoom()) * Math.sqrt(data.columns * data.rows * data.tall / data.points.length);
    return Math.max(2, Math.min(6, side / 5));
  }
  function sizeDots() {
    var radius = dotRadius();
    Object.keys(marks).forEach(function (number) {
      if (number !== chosen) marks[number].setStyle({ weight: radius < 4 ? 1 : 2 }).setRadius(radius);
    });
  }

  // The frame is as high as the map at that width, and no higher than there is room.
  function fitFrame(width, most) {
    frame.style.height = Math.round(Math.max(160, Math.min(most, width * data.rows * data.tall / data.columns))) + "px";
  }
  function fitScreen() {
    frame.style.width = "";
    fitFrame(frame.parentNode.clientWidth, Math.min(680, 0.8 * window.innerHeight));
  }
  function showAll() {
    map.invalidateSize({ animate: false, pan: false });
    map.fitBounds(bounds, { animate: false });
  }
  function reachByKey(mark, point) {
    var shape = mark.getElement();
    shape.setAttribute("tabindex", "0");
    shape.setAttribute("role", "link");
    shape.setAttribute("aria-label", point.name + ", " + point.time + " min");
    shape.addEventListener("keydown", function (event) {
      if (event.key === "Enter") location.hash = "p" + point.number;
    });
    shape.addEventListener("focus", function () { mark.openTooltip(); });
    shape.addEventListener("blur", function () { mark.closeTooltip(); });
  }
  function drawMap() {
    fitScreen();
    var outlined = data.areas.filter(function (area) { return area.length > 0; }).length;
    if (outlined < data.points.length) {
      document.getElementById("outlines").textContent = " Outlines of " + outlined + " of " + data.points.length + " subareas are drawn; study.gpkg has them all.";
    }
    // Shapes print sharp and can be reached by key; beyond some hundreds of points dots are quicker.
    var few = data.points.length <= 400;
    map = L.map("map", { crs: L.CRS.Simple, preferCanvas: !few, minZoom: -12, maxZoom: 6, zoomSnap: 0, attributionControl: false });
    map.fitBounds(bounds, { animate: false });
    map.createPane("iso").style.zIndex = 450;
    ["relief", "times"].forEach(function (name) {
      var picture = document.getElementById(name);
      // Drawn at once at any size: paper does not wait.
      L.imageOverlay(picture.src, bounds, { alt: picture.alt, className: name }).addTo(map).getElement().decoding = "sync";
    });
    data.points.forEach(function (point) {
      (data.areas[point.number - 1] || []).forEach(function (rings) {
        L.polygon(rings.map(line), { color: "#222", weight: 1, opacity: 0.55, fill: false, interactive: false }).addTo(map);
      });
    });
    data.differences.forEach(function (side) {
      side.areas.forEach(function (polygons) {
        polygons.forEach(function (rings) {
          L.polygon(rings.map(line), { color: side.colour, weight: 2, dashArray: side.dash, fillColor: side.colour, fillOpacity: 0.5, interactive: false }).addTo(map);
        });
      });
    });
    data.points.forEach(function (point) {
      (data.paths[point.number - 1] || []).forEach(function (piece) {
        L.polyline(line(piece[1]), { color: data.regimes[piece[0]].colour, weight: data.regimes[piece[0]].weight, dashArray: data.regimes[piece[0]].dash, interactive: false }).addTo(map);
      });
    });
    data.pipes.forEach(function (pipe) {
      L.polyline(line(pipe), { color: "#000", weight: 3, dashArray: "1 6", lineCap: "square", interactive: false }).addTo(map);
    });
    data.labels.forEach(function (label) {
      L.marker(at(label[0], label[1]), { interactive: false, keyboard: false, pane: "iso", icon: L.divIcon({ className: "iso", html: label[2] + " min", iconSize: [50, 14] }) }).addTo(map);
    });
    data.points.forEach(function (point) {
      var name = document.createElement("span");
      name.textContent = point.name + ", " + point.time + " min";
      marks[point.number] = L.circleMarker(at(point.at[0], point.at[1]), { color: "#000", fillColor: "#fff", fillOpacity: 1 })
        .bindTooltip(name).on("click", function () { location.hash = "p" + point.number; }).addTo(map);
      if (few) reachByKey(marks[point.number], point);
    });
    sizeDots();
    map.on("zoomend", sizeDots);
    var width = frame.parentNode.clientWidth;
    window.addEventListener("resize", function () {
      if (frame.parentNode.clientWidth === width) return;
      width = frame.parentNode.clientWidth;
      fitScreen();
      showAll();
    });
  }

  var longest = null;
  function showOnMap(number) {
    if (!map) return;
    if (chosen) marks[chosen].setStyle({ fillColor: "#fff" }).setRadius(dotRadius());
    if (longest) { longest.remove(); longest = null; }
    if (data.longest[number - 1]) longest = L.polyline(line(data.longest[number - 1]), { color: "#cc79a7", weight: 4, dashArray: "2 7", interactive: false }).addTo(map);
    marks[number].setStyle({ fillColor: "#cc79a7" }).setRadius(9).bringToFront();
    if (!map.getBounds().contains(marks[number].getLatLng())) map.panTo(marks[number].getLatLng());
  }

  // A point is chosen by the address, so that it can be linked to.
  function choose() {
    var match = /^#p(\d+)$/.exec(location.hash);
    var number = match ? match[1] : null;
    if (!number || !rowOf[number]) return;
    if (chosen) {
      rowOf[chosen].classList.remove("on");
      var old = document.getElementById("p" + chosen);
      if (old) old.classList.remove("on");
    }
    showOnMap(number);
    chosen = number;
    rowOf[number].classList.add("on");
    var section = document.getElementById("p" + number);
    document.getElementById("reduced").hidden = !!section;
    if (!section) return;
    section.classList.add("on");
    section.querySelector("h2").focus({ preventScroll: true });
    section.scrollIntoView();
  }
  window.addEventListener("hashchange", choose);

  // Printing: the points whose box is ticked, a page each; else the one that is open.
  function asked() { return body.querySelectorAll("input:checked"); }
  body.addEventListener("change", function (event) {
    var section = document.getElementById("p" + event.target.value);
    if (section) section.classList.toggle("asked", event.target.checked);
    root.classList.toggle("choosing", asked().length > 0);
  });
  document.getElementById("print").addEventListener("click", function () { window.print(); });
  document.getElementById("all").addEventListener("click", function () {
    rows.forEach(function (row) {
      var box = row.querySelector("input");
      if (row.hidden || !box) return;
      box.checked = true;
      document.getElementById("p" + box.value).classList.add("asked");
    });
    root.classList.toggle("choosing", asked().length > 0);
  });
  // On paper the calculation sheets are open.
  var opened = [];
  window.addEventListener("beforeprint", function () {
    opened = Array.prototype.filter.call(document.querySelectorAll("section.asked details.sheet, section.on details.sheet"), function (sheet) { return !sheet.open; });
    opened.forEach(function (sheet) { sheet.open = true; });
    // 96 dots an inch: 170 mm of paper wide and 150 mm high at most, and no larger than the map; a narrow one has its legend beside it.
    var scale = Math.min(640 / data.columns, 570 / (data.rows * data.tall));
    frame.style.width = Math.round(data.columns * scale) + "px";
    frame.style.height = Math.round(data.rows * data.tall * scale) + "px";
    frame.parentNode.classList.toggle("beside", data.columns * scale < 500);
    showAll();
  });
  window.addEventListener("afterprint", function () {
    opened.forEach(function (sheet) { sheet.open = false; });
    frame.parentNode.classList.remove("beside");
    fitScreen();
    showAll();
  });
  drawMap();
  choose();
})();
