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
  const columns = chosen().map(columnOf), rows = history.table, head = [["time", "d²/κ"]];
  for (const c of columns) head.push([c.name, c.unit]);
  const values = columns.map((c) => valuesAt(c, rows));
  const lines = rows.map((row, k) => [history.times[row], ...values.map((v) => v[k])]);
  details.querySelector(".scroll").replaceChildren(table("History, " + rows.length + " rows of history.csv", head, lines));
}
/* Every column has the rows of the table; one that had not would show none, never that of another time. */
function valuesAt(c, rows) {
  if (!c.steps) return rows.map((row) => c.values[row]);
  let place = 0;
  const at = new Map(c.steps.map((step, k) => [(place += step), c.values[k]]));
  return rows.map((row) => at.get(row));
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
  new Chart(at("curve-panels"), { name: nameOf(t.columns.find((one) => one.name === code)), code, unit: unitIn(t, code), xName: data.parameter,
    xLabel: data.parameter + (data.parameterUnit ? ", " + data.parameterUnit : ""), x: xs, connect: true,
    logX: xs[0] > 0 && xs[xs.length - 1] >= 10 * (1 - 1e-9) * xs[0],
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
