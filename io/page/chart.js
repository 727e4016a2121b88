/* --- charts ------------------------------------------------------------------------------------- */
const charts = [];
const dashes = [null, [6, 4], [2, 3], [10, 4, 2, 4]];
const inks = ["accent", "second", "third", "quiet"];
const inkOf = (k) => inks[k % inks.length], dashOf = (k) => dashes[k % dashes.length];
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
    stroke.setAttribute("style", "stroke: var(--" + inkOf(k) + "); stroke-width: 2.5; stroke-dasharray: " +
      (dashOf(k) ? dashOf(k).join(" ") : "none"));
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
    this.spec.series.forEach((s, k) => { series[s.name] = { strokePattern: dashOf(k), color: colour(inkOf(k)) }; });
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
