"use strict";
/* Draws the page from the data that stands in it. No text of the run becomes markup: everything goes through
   textContent and attributes. */
(function () {
  const data = JSON.parse(document.getElementById("data").textContent);
  const at = (id) => document.getElementById(id);
  const make = (tag, attributes, ...inside) => {
    const element = document.createElement(tag);
    for (const [name, value] of Object.entries(attributes || {}))
      if (name === "text") element.textContent = value;
      else if (value === true) element.setAttribute(name, "");
      else if (value !== false && value != null) element.setAttribute(name, value);
    element.append(...inside);
    return element;
  };
  const isNumber = (x) => typeof x === "number" && isFinite(x);

  /* --- numbers ----------------------------------------------------------------------------- */
  const raised = (n) => String(n).replace(/-/g, "⁻").replace(/\d/g, (d) => "⁰¹²³⁴⁵⁶⁷⁸⁹"[d]);
  function words(x, digits = 6) {
    if (!isNumber(x)) return "–";
    if (x === 0) return "0";
    const size = Math.abs(x);
    if (size >= 1e-4 && size < 1e7) return String(Number(x.toPrecision(digits))).replace("-", "−");
    const [mantissa, exponent] = x.toExponential(digits - 1).split("e");
    return (String(Number(mantissa)) + " × 10" + raised(Number(exponent))).replace(/^-/, "−");
  }
  const tick = (x) => words(x, 4).replace(/^1 × /, "");
  /* As many digits as tell the marks of an axis apart. */
  const tickOver = ([low, high]) => (x) => {
    const largest = Math.max(Math.abs(low), Math.abs(high)), digits = Math.ceil(Math.log10(largest / (high - low))) + 2;
    return Math.abs(x) < 1e-9 * largest ? "0" : words(x, Math.min(10, Math.max(3, digits || 3))).replace(/^1 × /, "");
  };

  /* --- what a reader has set, kept when the page is read anew ---------------------------------- */
  const place = "lidwright " + location.pathname;
  const kept = (() => {
    try { return JSON.parse(sessionStorage.getItem(place)) || {}; } catch (unused) { return {}; }
  })();
  function keep(change) {
    Object.assign(kept, change);
    try { sessionStorage.setItem(place, JSON.stringify(kept)); } catch (unused) { /* private mode */ }
  }

  /* --- light and dark ------------------------------------------------------------------------- */
  const root = document.documentElement;
  const redrawn = [];
  const colour = (name) => getComputedStyle(root).getPropertyValue("--" + name).trim();
  function setTheme(theme) {
    root.dataset.theme = theme;
    at("theme").setAttribute("aria-pressed", String(theme === "dark"));
    for (const redraw of redrawn) redraw();
  }
  const system = matchMedia("(prefers-color-scheme: dark)");
  const theme = () => kept.theme || (system.matches ? "dark" : "light");
  at("theme").addEventListener("click", () => {
    keep({ theme: theme() === "dark" ? "light" : "dark" });
    setTheme(theme());
  });
  system.addEventListener("change", () => setTheme(theme()));
  setTheme(theme());

  /* --- heading, verdict, numbers ----------------------------------------------------------------- */
  const kinds = { march: "a run in time", settle: "steady states", onset: "onset of convection" };
  at("kind").textContent = "lidwright · " + kinds[data.kind];
  at("written").textContent = "Written " + data.written.replace("T", " ").replace("Z", " UTC") + ".";
  at("running").hidden = !data.running;
  at("program").textContent = data.program;
  at("folder").textContent = data.folder;
  at("verdict-heading").textContent = data.verdict.heading;
  at("verdict-heading").classList.add(data.verdict.tone);
  at("verdict-sentence").textContent = data.verdict.sentence;
  for (const line of data.verdict.evidence) at("verdict-evidence").append(make("li", { text: line }));
  at("verdict-evidence").hidden = data.verdict.evidence.length === 0;
  at("soundness").textContent = data.soundness;
  at("soundness").hidden = !data.soundness;

  function figureCells(number) {
    return [make("td", { class: "value", text: number.value }),
            make("td", { class: "error", text: number.error && "± " + number.error }),
            make("td", { class: "unit", text: number.unit })];
  }
  /* What is the same of all is said once. */
  const notes = new Set(data.figures.map((f) => f.note));
  if (data.figures.length > 1 && notes.size === 1 && !notes.has("")) {
    at("figures").after(make("p", { class: "small", text: "All of them: " + data.figures[0].note + "." }));
    for (const f of data.figures) f.note = "";
  }
  for (const f of data.figures) {
    const head = make("th", { scope: "row", rowspan: f.body ? 2 : 1, text: f.label });
    if (f.note) head.append(make("span", { class: "note", text: f.note }));
    const rows = [make("tr", { class: "first" + (f.known ? "" : " unknown") }, head, ...figureCells(f.number))];
    if (f.body) rows.push(make("tr", { class: "body" + (f.known ? "" : " unknown") }, ...figureCells(f.body)));
    at("figures").tBodies[0].append(...rows);
  }

  /* --- charts ------------------------------------------------------------------------------------- */
  const charts = [];
  const dashes = [null, [6, 4], [2, 3], [10, 4, 2, 4]];
  const inks = ["accent", "second", "third", "quiet"];
  const say = (text) => { at("said").textContent = text; };

  /* One chart: series over a common x. `spec`: name, code, unit, xName, series [{name, values}], x, log, logX, remark,
     band {mean, error, from, known}, group (charts with the same x that move together). */
  class Chart {
    constructor(into, spec) {
      this.spec = spec;
      this.readout = make("span", { class: "readout" });
      this.remark = make("span", { class: "remark" });
      this.caption = make("figcaption", {}, make("span", { class: "name", text: spec.name }));
      if (spec.unit) this.caption.append(make("span", { class: "unit", text: spec.unit }));
      if (spec.code) this.caption.append(make("code", { text: spec.code }));
      if (spec.series.length > 1) spec.series.forEach((s, k) => this.caption.append(this.key(s, k)));
      this.caption.append(this.readout, this.remark);
      this.box = make("div", { class: "chart", tabindex: "0", role: "group",
        "aria-label": "Chart of " + spec.name + ". Arrow keys move the cursor, plus and minus zoom, 0 shows all." });
      this.figure = make("figure", { class: "panel" }, this.caption, this.box);
      into.append(this.figure);
      this.draw();
      this.box.addEventListener("keydown", (event) => this.pressed(event));
      charts.push(this);
    }
    key(series, k) {
      const line = document.createElementNS("http://www.w3.org/2000/svg", "svg");
      line.setAttribute("viewBox", "0 0 30 10");
      line.setAttribute("aria-hidden", "true");
      const stroke = document.createElementNS("http://www.w3.org/2000/svg", "path");
      stroke.setAttribute("d", "M0 5H30");
      stroke.setAttribute("style", "stroke: var(--" + inks[k] + "); stroke-width: 2.5; stroke-dasharray: " +
        (dashes[k] ? dashes[k].join(" ") : "none"));
      line.append(stroke);
      return make("span", { class: "key" }, line, make("span", { text: series.name }));
    }
    /* Values that a logarithmic axis cannot show are left out, and it is said how many. */
    rows() {
      const log = this.logarithmic;
      return this.spec.x.map((x, k) => [x, ...this.spec.series.map((s) => {
        const y = s.values[k];
        return isNumber(y) && (!log || y > 0) ? y : null;
      })]);
    }
    say(text) { this.remark.textContent = text; }
    prepare() {
      const all = this.spec.series.flatMap((s) => s.values).filter(isNumber);
      const positive = all.filter((y) => y > 0);
      this.logarithmic = Boolean(this.spec.log) && positive.length > 0;
      const left = all.length - positive.length;
      let remark = this.spec.remark || "";
      if (this.spec.log && !this.logarithmic) remark = "No value is above 0: drawn linear.";
      else if (this.logarithmic && left) remark = left + (left === 1 ? " value" : " values") + " not above 0 left out.";
      this.say(remark);
      return all.length > 0;
    }
    options() {
      const quiet = colour("quiet"), line = colour("line");
      const labels = [this.spec.xName, ...this.spec.series.map((s) => s.name)];
      const series = {};
      this.spec.series.forEach((s, k) => { series[s.name] = { strokePattern: dashes[k], color: colour(inks[k]) }; });
      return {
        labels, series, legend: "never", strokeWidth: 1.6, drawPoints: this.spec.x.length <= 80, pointSize: 2.2,
        highlightCircleSize: 4, connectSeparatedPoints: Boolean(this.spec.connect), logscale: this.logarithmic,
        gridLineColor: line, axisLineColor: quiet, gridLineWidth: 0.6, axisLabelFontSize: 12, rightGap: 12,
        xlabel: this.spec.xLabel || this.spec.xName, xLabelHeight: 16, titleHeight: 0, valueRange: this.range(),
        axes: { x: { drawGrid: false, axisLabelFormatter: (x, unused, get, g) => tickOver(g.xAxisRange())(x), logscale: Boolean(this.spec.logX), axisLabelWidth: 70,
                     pixelsPerLabel: 64, ...(this.spec.whole ? { ticker: wholeTicks } : {}) },
                y: { axisLabelFormatter: (y, unused, get, g) => (this.logarithmic ? tick(y) : tickOver(g.yAxisRange())(y)), axisLabelWidth: 62, pixelsPerLabel: 26, ticker: this.logarithmic ? logTicks : Dygraph.numericTicks } },
        interactionModel: gestures,
        underlayCallback: (canvas, area, g) => this.under(canvas, area, g),
        highlightCallback: (event, x) => this.pointed(x),
        unhighlightCallback: () => unpoint(this.spec.group),
        zoomCallback: (low, high) => zoom(this.spec.group, [low, high], this),
        clickCallback: (event, x) => this.spec.onClick && this.spec.onClick(x),
      };
    }
    range() {
      const [low, high] = this.spec.span || [NaN, NaN];
      if (!(high > low) || (this.logarithmic && low <= 0)) return null;
      return this.logarithmic ? [low / 1.3, high * 1.3] : [low - 0.04 * (high - low), high + 0.04 * (high - low)];
    }
    draw() {
      if (this.graph) { this.graph.destroy(); this.graph = null; }
      this.box.replaceChildren();
      const any = this.prepare();
      this.box.classList.toggle("empty", !any);
      if (!any) { this.box.textContent = "Not defined in this run."; return; }
      const options = this.options();
      if (this.spec.group === "history" && kept.window) options.dateWindow = kept.window;
      this.graph = new Dygraph(this.box, this.rows(), options);
    }
    change(spec) {
      Object.assign(this.spec, spec);
      if (!this.graph) return this.draw();
      this.prepare();
      this.graph.updateOptions({ file: this.rows(), logscale: this.logarithmic, valueRange: this.range() });
    }
    /* The discarded start, the mean with its error, and the moment of the field. */
    under(canvas, area, g) {
      const b = this.spec.band;
      const across = (x) => Math.min(Math.max(g.toDomXCoord(x), area.x), area.x + area.w);
      const down = (y) => Math.min(Math.max(g.toDomYCoord(y), area.y), area.y + area.h);
      if (b && isNumber(b.from) && b.from > this.spec.x[0]) {
        canvas.fillStyle = colour("shade");
        canvas.fillRect(area.x, area.y, across(b.from) - area.x, area.h);
      }
      if (b && b.known && isNumber(b.mean) && !(this.logarithmic && b.mean - (b.error || 0) <= 0)) {
        const left = across(b.from), width = area.x + area.w - left;
        const top = down(b.mean + (b.error || 0)), bottom = down(b.mean - (b.error || 0));
        canvas.fillStyle = colour("band");
        canvas.fillRect(left, top, width, Math.max(bottom - top, 1.5));
      }
      if (this.spec.moment) {
        const x = g.toDomXCoord(this.spec.moment());
        if (x < area.x || x > area.x + area.w) return;
        canvas.strokeStyle = colour("second");
        canvas.lineWidth = 1.5;
        canvas.setLineDash([2, 3]);
        canvas.beginPath();
        canvas.moveTo(x, area.y);
        canvas.lineTo(x, area.y + area.h);
        canvas.stroke();
        canvas.setLineDash([]);
      }
    }
    nearest(x) {
      const xs = this.spec.x;
      let best = 0;
      for (let k = 1; k < xs.length; ++k) if (Math.abs(xs[k] - x) < Math.abs(xs[best] - x)) best = k;
      return best;
    }
    text(k) {
      const values = this.spec.series.map((s) => words(s.values[k], 7)).join(",  ");
      return values + " at " + this.spec.xName + " " + words(this.spec.x[k], 7);
    }
    pointed(x) { point(this.spec.group || this, x, this); }
    show(k, mark) {
      this.cursor = k;
      this.readout.textContent = this.text(k);
      if (mark && this.graph) this.graph.setSelection(k);
    }
    hide() {
      this.cursor = null;
      this.readout.textContent = "";
      if (this.graph) this.graph.clearSelection();
    }
    pressed(event) {
      if (!this.graph || event.ctrlKey || event.metaKey || event.altKey) return;
      const last = this.spec.x.length - 1;
      const here = this.cursor == null ? 0 : this.cursor;
      const step = event.shiftKey ? Math.max(1, Math.round(last / 20)) : 1;
      const to = { ArrowRight: Math.min(last, here + step), ArrowLeft: Math.max(0, here - step), Home: 0, End: last }[event.key];
      if (to !== undefined) {
        point(this.spec.group || this, this.spec.x[to], null);
        say(this.spec.name + ": " + this.text(to));
      } else if (event.key === "+" || event.key === "=") this.zoomBy(0.5);
      else if (event.key === "-") this.zoomBy(2);
      else if (event.key === "0" || event.key === "Escape") zoom(this.spec.group || this, null, null);
      else return;
      event.preventDefault();
    }
    zoomBy(factor) {
      const [low, high] = this.graph.xAxisRange();
      const middle = this.cursor == null ? (low + high) / 2 : this.spec.x[this.cursor];
      const [first, last] = this.graph.xAxisExtremes();
      const window = [Math.max(first, middle - factor * (middle - low)), Math.min(last, middle + factor * (high - middle))];
      if (window[1] > window[0]) zoom(this.spec.group || this, window, null);
    }
  }

  const members = (group) => (group instanceof Chart ? [group] : charts.filter((c) => c.spec.group === group));
  let moving = false;
  function point(group, x, from) {
    if (moving) return;
    moving = true;
    for (const c of members(group)) if (c.graph) c.show(c.nearest(x), c !== from);
    moving = false;
  }
  function unpoint(group) {
    if (moving) return;
    moving = true;
    for (const c of members(group)) c.hide();
    moving = false;
  }
  function zoom(group, window, from) {
    if (!group || moving) return;
    moving = true;
    for (const c of members(group))
      if (c.graph && c !== from) c.graph.updateOptions({ dateWindow: window });
    moving = false;
    if (group === "history") {
      const some = members(group).find((c) => c.graph);
      const all = some && window && window[0] <= some.graph.xAxisExtremes()[0] && window[1] >= some.graph.xAxisExtremes()[1];
      keep({ window: all ? null : window });
    }
  }
  /* Powers of ten, with 2 and 5 between them where there is room; some powers left out where there is none. */
  function logTicks(low, high, pixels) {
    const decades = Math.log10(high / low), room = Math.max(2, pixels / 26), ticks = [];
    const parts = 3 * decades <= room ? [1, 2, 5] : [1], step = Math.max(1, Math.ceil(decades / room));
    for (let d = Math.floor(Math.log10(low)); d <= Math.ceil(Math.log10(high)); ++d)
      for (const part of parts) {
        const v = Number((part * 10 ** d).toPrecision(12));
        if (d % step === 0 && v >= low && v <= high) ticks.push({ v, label: tick(v) });
      }
    return ticks.length > 1 ? ticks : Dygraph.numericLinearTicks(low, high, pixels, linearOptions);
  }
  const linearOptions = (name) => ({ pixelsPerLabel: 26, labelsKMB: false, labelsKMG2: false, axisLabelFormatter: tick })[name];
  function wholeTicks(low, high, pixels, options) {
    const step = Math.max(1, Math.ceil((high - low) / Math.max(2, pixels / 60)));
    const ticks = [];
    for (let v = Math.ceil(low); v <= high; ++v) if (v % step === 0) ticks.push({ v, label: String(v) });
    return ticks;
  }
  /* One finger scrolls the page, two zoom the chart. */
  const gestures = (() => {
    const usual = Dygraph.defaultInteractionModel;
    const two = (name) => (event, g, context) => {
      if (event.touches.length > 1 || context.initialTouches && context.initialTouches.length > 1) usual[name](event, g, context);
    };
    return Object.assign({}, usual, { touchstart: two("touchstart"), touchmove: two("touchmove"), touchend: two("touchend") });
  })();
  redrawn.push(() => { for (const c of charts) c.draw(); });

  /* --- the field --------------------------------------------------------------------------------------- */
  const fields = data.fields;
  let frame = 0, layer = 0, goTo = () => {};
  const moment = () => (fields ? fields.times[frame] : NaN);

  /* Where each pixel of the canvas lies: the block of the image that it shows, and how much of it is shell. */
  class Shell {
    constructor(geometry) {
      this.g = geometry;
      const r = geometry.radii, l = geometry.laterals;
      this.rows = r.length - 1;
      this.columns = l.length - 1;
      this.x = [Infinity, -Infinity];
      this.y = [Infinity, -Infinity];
      for (const radius of [r[0], r[this.rows]])
        for (let k = 0; k <= 720; ++k) {
          const [x, y] = this.plane(radius, l[0] + (k / 720) * (l[this.columns] - l[0]));
          this.x = [Math.min(this.x[0], x), Math.max(this.x[1], x)];
          this.y = [Math.min(this.y[0], y), Math.max(this.y[1], y)];
        }
    }
    plane(r, l) {
      if (this.g.shape === "box") return [l, r];
      return this.g.shape === "axisymmetric" ? [r * Math.sin(l), r * Math.cos(l)] : [r * Math.cos(l), r * Math.sin(l)];
    }
    inShell(x, y) {
      if (this.g.shape === "box") return [y, x];
      const angle = this.g.shape === "axisymmetric" ? Math.atan2(x, y) : Math.atan2(y, x);
      const l = this.g.laterals, middle = (l[0] + l[this.columns]) / 2;
      const off = angle - middle;
      return [Math.hypot(x, y), middle + off - 2 * Math.PI * Math.round(off / (2 * Math.PI))];
    }
    get shape() { return (this.y[1] - this.y[0]) / (this.x[1] - this.x[0]); }
    fit(width) {
      this.width = width;
      this.scale = (width - 2) / (this.x[1] - this.x[0]);
      this.height = Math.ceil((this.y[1] - this.y[0]) * this.scale) + 2;
      this.block = new Int32Array(this.width * this.height);
      this.cover = new Uint8ClampedArray(this.width * this.height);
      for (let v = 0; v < this.height; ++v) for (let u = 0; u < this.width; ++u) this.place(u, v);
    }
    at(u, v) {
      return this.inShell(this.x[0] + (u - 1) / this.scale, this.y[1] - (v - 1) / this.scale);
    }
    place(u, v) {
      const [r, l] = this.at(u + 0.5, v + 0.5), { radii, laterals, full, shape } = this.g;
      let inside = Math.min(r - radii[0], radii[this.rows] - r) * this.scale;
      const arm = shape === "box" ? 1 : r;
      if (!full) inside = Math.min(inside, Math.min(l - laterals[0], laterals[this.columns] - l) * arm * this.scale);
      const n = v * this.width + u;
      this.cover[n] = 255 * Math.min(1, Math.max(0, inside + 0.5));
      this.block[n] = (this.rows - 1 - holding(radii, r)) * this.columns + holding(laterals, l);
    }
  }
  function holding(faces, x) {
    let low = 0, high = faces.length - 2;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (faces[middle] <= x) low = middle; else high = middle - 1;
    }
    return low;
  }

  if (fields) {
    const shell = new Shell(fields.geometry), canvas = at("shell"), decoded = new Map();
    const slider = at("slider"), last = fields.labels.length - 1;
    const bytesOf = (l, f) => {
      const name = l + " " + f;
      if (!decoded.has(name)) decoded.set(name, new Promise((done) => {
        const image = new Image();
        image.onload = () => {
          const small = make("canvas", { width: shell.columns, height: shell.rows });
          const pen = small.getContext("2d", { willReadFrequently: true });
          pen.drawImage(image, 0, 0);
          const pixels = pen.getImageData(0, 0, shell.columns, shell.rows).data;
          done(Uint8Array.from({ length: pixels.length / 4 }, (unused, k) => pixels[4 * k]));
        };
        image.src = "data:image/png;base64," + fields.layers[l].images[f];
      }));
      return decoded.get(name);
    };
    const paint = (bytes) => {
      const colours = fields.layers[layer].colours, pen = canvas.getContext("2d"), image = pen.createImageData(shell.width, shell.height), out = image.data;
      for (let n = 0; n < shell.block.length; ++n) {
        const c = colours[bytes[shell.block[n]]];
        out[4 * n] = c >> 16; out[4 * n + 1] = (c >> 8) & 255; out[4 * n + 2] = c & 255; out[4 * n + 3] = shell.cover[n];
      }
      pen.putImageData(image, 0, 0);
      outline(pen);
      canvas.dataset.shown = layer + " " + frame;
    };
    /* Walls and sides, so that the coldest rock stands out from a dark page. */
    const outline = (pen) => {
      const r = shell.g.radii, l = shell.g.laterals, ends = [r[0], r[shell.rows]], sides = [l[0], l[shell.columns]];
      const point = (radius, lateral) => {
        const [x, y] = shell.plane(radius, lateral);
        return [1 + (x - shell.x[0]) * shell.scale, 1 + (shell.y[1] - y) * shell.scale];
      };
      const across = (radius) => Array.from({ length: 361 }, (unused, k) => point(radius, sides[0] + (k / 360) * (sides[1] - sides[0])));
      const lines = ends.map(across);
      if (!shell.g.full) lines.push(...sides.map((lateral) => ends.map((radius) => point(radius, lateral))));
      pen.strokeStyle = colour("quiet");
      pen.lineWidth = Math.max(1, shell.width / 600);
      pen.beginPath();
      for (const line of lines) line.forEach(([x, y], k) => (k ? pen.lineTo(x, y) : pen.moveTo(x, y)));
      pen.stroke();
    };
    redrawn.push(() => draw());
    const draw = async () => {
      const wanted = [layer, frame], bytes = await bytesOf(...wanted);
      if (wanted[0] === layer && wanted[1] === frame) paint(bytes);
    };
    const size = () => {
      const tallest = 620, room = Math.min(canvas.parentElement.clientWidth, tallest / shell.shape);
      const width = Math.max(64, Math.round(room * Math.min(2, window.devicePixelRatio || 1)));
      if (width === shell.width) return;
      shell.fit(width);
      canvas.width = shell.width;
      canvas.height = shell.height;
      canvas.style.width = Math.round(room) + "px";
      draw();
    };
    const value = (l, byte) => {
      const x = l.low + (byte / 255) * (l.high - l.low);
      return l.log ? Math.pow(10, x) : x;
    };
    canvas.addEventListener("pointermove", async (event) => {
      const box = canvas.getBoundingClientRect(), l = fields.layers[layer];
      const u = (event.clientX - box.left) * shell.width / box.width, v = (event.clientY - box.top) * shell.height / box.height;
      const n = Math.floor(v) * shell.width + Math.floor(u);
      if (!(shell.cover[n] > 127)) { at("under").textContent = ""; return; }
      const bytes = await bytesOf(layer, frame), depth = shell.g.radii[shell.rows] - shell.at(u, v)[0];
      at("under").textContent = "about " + words(value(l, bytes[shell.block[n]]), 3) + " " + l.unit + " at depth " + words(depth, 3) + " d";
    });
    canvas.addEventListener("pointerleave", () => { at("under").textContent = ""; });

    const showLayer = () => {
      const l = fields.layers[layer];
      at("bar-title").textContent = l.title + (l.unit ? ", " + l.unit : "") + (l.bodyUnit ? " and " + l.bodyUnit : "") + (l.log ? " (logarithmic)" : "");
      const stops = l.colours.filter((c, k) => k % 15 === 0).map((c) => "#" + c.toString(16).padStart(6, "0"));
      at("bar-colours").style.background = "linear-gradient(to right, " + stops.join(", ") + ")";
      at("bar-marks").replaceChildren(...l.marks.map((m) => {
        const item = make("li", { text: m.words });
        if (m.body) item.append(make("span", { text: m.body }));
        return item;
      }));
    };
    const describe = () => {
      canvas.setAttribute("aria-label", fields.layers[layer].title + " in the shell, " + fields.labels[frame]);
      at("moment").textContent = fields.labels[frame];
      slider.setAttribute("aria-valuetext", fields.labels[frame]);
    };
    goTo = (to) => {
      frame = Math.min(last, Math.max(0, to));
      slider.value = frame;
      describe();
      draw();
      showProfiles();
      for (const c of charts) if (c.spec.moment && c.graph) c.graph.updateOptions({});
      keep({ frame: frame === last ? null : frame });
    };
    fields.layers.forEach((l, k) => {
      const choice = make("input", { type: "radio", name: "layer", value: k, checked: k === 0 });
      choice.addEventListener("change", () => { layer = k; showLayer(); describe(); draw(); keep({ layer }); });
      at("layers").append(make("label", {}, choice, " " + l.title));
    });
    at("layers").hidden = fields.layers.length < 2;
    if (kept.layer && fields.layers[kept.layer]) {
      layer = kept.layer;
      at("layers").querySelectorAll("input")[layer].checked = true;
    }
    slider.max = last;
    slider.addEventListener("input", () => { stop(); goTo(Number(slider.value)); });
    at("slider").parentElement.hidden = last === 0;
    let playing = null;
    const stop = () => {
      if (playing) clearInterval(playing);
      playing = null;
      at("play").textContent = "Play";
      at("moment").setAttribute("aria-live", "polite");
    };
    at("play").addEventListener("click", () => {
      if (playing) return stop();
      if (frame === last) goTo(0);
      at("play").textContent = "Stop";
      at("moment").setAttribute("aria-live", "off");
      playing = setInterval(() => { if (frame === last) stop(); else goTo(frame + 1); }, 450);
    });
    const notes = [];
    if (fields.total > fields.labels.length) notes.push(fields.labels.length + " of " + fields.total + " snapshots, evenly spaced.");
    if (fields.factor > 1) notes.push("Blocks of " + fields.factor + " × " + fields.factor + " cells.");
    notes.push("The colours span all that is shown here. All of it: fields.pvd.");
    at("field-note").textContent = notes.join(" ");
    showLayer();
    new ResizeObserver(size).observe(canvas.parentElement);
    frame = isNumber(kept.frame) ? Math.min(kept.frame, last) : last;
    slider.value = frame;
    size();
    describe();
  }
  if (data.missing) {
    at("missing").hidden = false;
    at("missing").textContent = "Fields and profiles are not shown. " + data.missing;
  }
  at("field-body").hidden = !fields;

  /* --- history --------------------------------------------------------------------------------------------- */
  const nameOf = (c) => c.label[0].toUpperCase() + c.label.slice(1);
  const first = ["nusselt_outer", "nusselt_inner", "velocity_rms", "temperature_mean", "lid_thickness_velocity", "mobility"];
  const history = data.history;
  const columnOf = (code) => history.columns.find((c) => c.name === code);
  const pointsOf = (c) => {
    if (!c.steps) return history.times;
    let row = 0;
    return c.steps.map((step) => history.times[(row += step)]);
  };
  function historyChart(c) {
    const chart = new Chart(at("panels"), {
      name: nameOf(c), code: c.name, unit: c.unit, xName: "time", xLabel: "time, d²/κ", x: pointsOf(c),
      series: [{ name: c.name, values: c.values }], band: c.mean, group: "history", moment, log: at("log").checked,
      remark: c.mean && !c.mean.known && c.values.some(isNumber) ? "No mean: " + c.mean.words + "." : "",
      onClick: (x) => {
        if (!fields) return;
        let best = 0;
        fields.times.forEach((t, k) => { if (Math.abs(t - x) < Math.abs(fields.times[best] - x)) best = k; });
        goTo(best);
      },
    });
    chart.box.dataset.column = c.name;
    return chart;
  }
  function order() {
    const wanted = history.columns.map((c) => c.name);
    const place = (chart) => (first.includes(chart.spec.code) ? first.indexOf(chart.spec.code) : 100 + wanted.indexOf(chart.spec.code));
    at("panels").append(...charts.filter((c) => c.spec.group === "history").sort((a, b) => place(a) - place(b)).map((c) => c.figure));
  }
  const chosen = () => [...at("columns").querySelectorAll("input:checked")].map((box) => box.value);
  function showColumn(code, shown) {
    const there = charts.find((c) => c.spec.group === "history" && c.spec.code === code);
    if (shown && !there) { historyChart(columnOf(code)); order(); }
    if (!shown && there) {
      if (there.graph) there.graph.destroy();
      there.figure.remove();
      charts.splice(charts.indexOf(there), 1);
    }
  }
  if (history) {
    at("log").checked = Boolean(kept.log);
    const start = kept.columns || first.filter((code) => { const c = columnOf(code); return c && !c.constant && c.values.some(isNumber); });
    for (const c of history.columns) {
      const box = make("input", { type: "checkbox", value: c.name, checked: start.includes(c.name) });
      box.addEventListener("change", () => { showColumn(c.name, box.checked); keep({ columns: chosen() }); fillHistoryTable(); });
      at("columns").append(make("label", { title: c.meaning }, box, " " + nameOf(c)));
    }
    for (const code of start) if (columnOf(code)) historyChart(columnOf(code));
    order();
    at("log").addEventListener("change", () => {
      keep({ log: at("log").checked });
      for (const c of members("history")) { c.spec.log = at("log").checked; c.draw(); }
    });
    at("whole").addEventListener("click", () => zoom("history", null, null));
    for (const [kind, text] of [["shade", "start left out of the means"], ["band", "mean ± error"], ["at", "moment of the field"]])
      if (kind !== "at" || fields) at("legend-history").append(make("span", { class: "meaning" }, make("span", { class: "swatch " + kind }), text));
    const thinned = history.columns.some((c) => c.steps);
    at("history-note").textContent = history.rows + " rows. " + (thinned ? "Charts draw fewer points, with every extreme. " : "") +
      "All of them, to the last digit: history.csv. Means with errors: statistics.csv.";
    at("history-table").addEventListener("toggle", fillHistoryTable);
  }
  function fillHistoryTable() {
    const details = at("history-table");
    if (!details.open) return;
    const columns = chosen().map(columnOf), rows = Math.min(60, history.times.length), head = [["time", "d²/κ"]];
    for (const c of columns) head.push([c.name, c.unit]);
    const lines = [];
    for (let k = 0; k < rows; ++k) {
      const row = Math.round((k * (history.times.length - 1)) / Math.max(1, rows - 1));
      lines.push([history.times[row], ...columns.map((c) => valueAt(c, row))]);
    }
    details.querySelector(".scroll").replaceChildren(table("History, " + rows + " rows of history.csv", head, lines));
  }
  /* A column that was thinned may have no value at a row: the one before it stands for it. */
  function valueAt(c, row) {
    if (!c.steps) return c.values[row];
    let place = 0, k = -1;
    for (const step of c.steps) { place += step; if (place > row) break; ++k; }
    return c.values[Math.max(0, k)];
  }

  function table(caption, head, lines) {
    const holder = make("table", {}, make("caption", { class: "unseen", text: caption }));
    const names = make("tr");
    const numeric = head.map((unused, k) => lines.some((line) => typeof line[k] === "number"));
    head.forEach(([name, unit], k) => {
      const cell = make("th", { scope: "col", class: numeric[k] && "number", text: name });
      if (unit) cell.append(make("small", { text: unit }));
      names.append(cell);
    });
    holder.append(make("thead", {}, names));
    const body = make("tbody");
    for (const line of lines)
      body.append(make("tr", {}, ...line.map((x, k) => make("td", { class: numeric[k] && "number", text: typeof x === "string" ? x : words(x, 7) }))));
    holder.append(body);
    return holder;
  }

  /* --- profiles ------------------------------------------------------------------------------------------------ */
  const profilePlan = [["Temperature", ["temperature", "temperature_adiabatic"], ["mean", "adiabat"], false],
    ["Rms velocity", ["velocity_radial_rms", "velocity_lateral_rms"], ["radial", "lateral"], false],
    ["Viscosity", ["viscosity"], ["viscosity"], true],
    ["Heat flow", ["heat_conducted", "heat_advected"], ["conducted", "advected"], false]];
  const profileCharts = [];
  const across = fields && fields.geometry.shape === "box" ? "height, d: bottom left, top right" : "radius, d: core left, surface right";
  const columnIn = (set, code) => set.columns.find((c) => c.name === code);
  const changes = (values) => Math.max(...values) > Math.min(...values) * (1 + 1e-9);
  /* Of a mode of onset only the flow has means that say something. */
  const planned = profilePlan.filter(([title]) => data.kind !== "onset" || /velocity|Viscosity/.test(title));
  for (const [title, codes, labels, log] of data.profiles.length ? planned : []) {
    const there = codes.map((code, k) => [code, labels[k]]).filter(([code]) => columnIn(data.profiles[0], code));
    if (!there.length) continue;
    if (log && !data.profiles.some((set) => changes(columnIn(set, codes[0]).values))) continue;
    const all = data.profiles.flatMap((set) => there.flatMap(([code]) => columnIn(set, code).values)).filter(isNumber);
    const chart = new Chart(at("profile-panels"), {
      name: title, unit: columnIn(data.profiles[0], codes[0]).unit, xName: "radius",
      xLabel: across, x: [], series: there.map(([code, name]) => ({ name, code, values: [] })),
      log, group: "profiles", span: [Math.min(...all), Math.max(...all)],
    });
    profileCharts.push(chart);
  }
  function showProfiles() {
    const set = data.profiles[frame];
    if (!set) return;
    for (const chart of profileCharts)
      chart.change({ x: columnIn(set, "radius").values, series: chart.spec.series.map((s) => ({ ...s, values: columnIn(set, s.code).values })) });
    at("profiles-note").textContent = "Means over surfaces. " + (fields.labels.length > 1
      ? "Now at " + fields.labels[frame] + "; the slider of the field moves them. " : "") + "File: " + set.file + ".";
    fillProfileTable();
  }
  function fillProfileTable() {
    const details = at("profiles-table"), set = data.profiles[frame];
    if (!details.open || !set) return;
    const lines = set.columns[0].values.map((unused, k) => set.columns.map((c) => c.values[k]));
    details.querySelector(".scroll").replaceChildren(table("Profiles, " + set.file, set.columns.map((c) => [c.name, c.unit]), lines));
  }
  at("profiles-table").addEventListener("toggle", fillProfileTable);
  showProfiles();

  /* --- curves of steady states and of onset, and all tables ------------------------------------------------------- */
  const tableOf = (file) => data.tables.find((t) => t.file === file);
  const column = (t, code) => { const c = t.columns.find((one) => one.name === code); return c ? c.values : []; };
  const unitIn = (t, code) => { const c = t.columns.find((one) => one.name === code); return c ? c.unit : ""; };

  /* A branch may turn back at a fold: each piece between two folds is a series of its own over all parameters. */
  function pieces(x, y) {
    const runs = [[0]];
    for (let k = 1; k < x.length; ++k) {
      const run = runs[runs.length - 1], before = run.length > 1 ? Math.sign(x[run[1]] - x[run[0]]) : 0;
      if (before && Math.sign(x[k] - x[k - 1]) !== before) runs.push([k - 1, k]);
      else run.push(k);
    }
    const xs = [...new Set(x)].sort((a, b) => a - b);
    const rows = runs.map((run) => {
      const values = xs.map(() => null);
      for (const k of run) values[xs.indexOf(x[k])] = y[k];
      return values;
    });
    return { xs, rows };
  }
  function branchCurve(t, code) {
    const x = column(t, "parameter"), y = column(t, code);
    if (!y.some(isNumber) || !changes(y.filter(isNumber))) return;
    const { xs, rows } = pieces(x, y);
    new Chart(at("curve-panels"), { name: nameOf(t.columns.find((one) => one.name === code)), code, unit: unitIn(t, code), xName: data.parameter, x: xs, connect: true,
      logX: xs[0] > 0 && xs[xs.length - 1] > 20 * xs[0],
      series: rows.map((values, k) => ({ name: k === 0 ? "branch" : "beyond fold " + k, values })) });
  }
  if (tableOf("branch.csv")) {
    const t = tableOf("branch.csv");
    for (const code of ["nusselt_outer", "nusselt_inner", "velocity_rms", "temperature_mean", "growth"])
      if (column(t, code).length) branchCurve(t, code);
  }
  if (tableOf("newton.csv")) {
    const t = tableOf("newton.csv"), residual = column(t, "residual");
    new Chart(at("curve-panels"), { name: "Way to the steady state", code: "residual", unit: "heat flow/heat capacity", xName: "row", whole: true,
      xLabel: "row of newton.csv", x: residual.map((unused, k) => k + 1), series: [{ name: "residual", values: residual }], log: true });
  }
  if (tableOf("onset.csv")) {
    const t = tableOf("onset.csv");
    new Chart(at("curve-panels"), { name: "Neutral Rayleigh number", code: "rayleigh", xName: "mode", whole: true, x: column(t, "mode"),
      series: [{ name: "rayleigh", values: column(t, "rayleigh") }], log: true });
  }
  for (const t of data.tables) {
    const details = make("details", {}, make("summary", { text: t.title + " (" + t.file + ")" }));
    details.addEventListener("toggle", () => {
      if (details.childElementCount > 1) return;
      const lines = t.rows ? t.rows.slice(1).map((row) => row.map((x) => (x !== "" && isFinite(x) ? Number(x) : x)))
                           : t.columns[0].values.map((unused, k) => t.columns.map((c) => c.values[k]));
      const head = t.rows ? t.rows[0].map((name) => [name, ""]) : t.columns.map((c) => [c.name, c.unit]);
      details.append(scrolled(t.title, table(t.title, head, lines)));
    });
    at("all-tables").append(details);
  }
  function scrolled(label, inside) {
    return make("div", { class: "scroll", tabindex: "0", role: "region", "aria-label": label }, inside);
  }

  /* --- health, limits, case, origin --------------------------------------------------------------------------------- */
  const classes = { good: "good", "look closer": "look", poor: "poor" };
  at("health-overall").textContent = data.health.rows.length ? data.health.overall : "";
  for (const r of data.health.rows)
    at("health-table").tBodies[0].append(make("tr", {},
      make("th", { scope: "row", text: r.name }, make("small", { text: r.meaning })),
      make("td", { class: "number", text: r.value }),
      make("td", { class: "judgement " + (classes[r.judgement] || ""), text: r.judgement }),
      make("td", { text: r.threshold })));
  for (const line of data.limits) at("all-limits").append(make("li", { text: line }));
  at("case-text").textContent = data.case;
  data.provenance.forEach((session, k) => {
    const list = make("dl");
    for (const [key, text] of session) list.append(make("dt", { text: key.replace(/^library\./, "").replace(/_/g, " ") }), make("dd", { text }));
    at("sessions").append(make("h3", { text: data.provenance.length > 1 ? "Session " + (k + 1) : "Session" }), list);
  });

  /* --- what there is nothing to show in is left out; contents -------------------------------------------------------- */
  const empty = { field: !fields && !data.missing, history: !history, profiles: !profileCharts.length, curves: !at("curve-panels").childElementCount,
    numbers: !data.figures.length, health: !data.health.rows.length, tables: !data.tables.length };
  for (const section of document.querySelectorAll("main > section")) {
    section.hidden = Boolean(empty[section.id]);
    if (!section.hidden)
      at("contents").append(make("li", {}, make("a", { href: "#" + section.id, text: section.querySelector("h2").textContent })));
  }
  for (const box of document.querySelectorAll(".scroll"))
    if (!box.hasAttribute("tabindex"))
      for (const [name, value] of [["tabindex", "0"], ["role", "region"], ["aria-label", box.dataset.label]]) box.setAttribute(name, value);

  /* --- print: light, two charts side by side. What is drawn anew while the browser prints stays blank, so the charts are
     scaled as they stand, and those drawn for a dark page are turned over. ------------------------------------------------- */
  const paper = matchMedia("print");
  const chartOnPaper = 345;  // px: 9.1 cm
  const printing = (yes) => {
    for (const c of charts) {
      if (!c.graph) continue;
      const width = c.graph.size().width;  // the box may have the paper's already
      c.box.style.width = yes ? width + "px" : "";
      c.box.style.zoom = yes ? Math.min(1, chartOnPaper / width) : "";
    }
    root.classList.toggle("turned", yes && root.dataset.theme === "dark");
    root.dataset.theme = yes ? "light" : theme();
  };
  paper.addEventListener("change", (event) => printing(event.matches));

  /* --- a run that goes on ------------------------------------------------------------------------------------------------- */
  if (data.running && data.reload > 0) setTimeout(() => location.reload(), 1000 * data.reload);
  document.documentElement.dataset.ready = "yes";
})();
