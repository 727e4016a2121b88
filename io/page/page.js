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

/* --- print: light. What is drawn anew while the browser prints stays blank, so the charts stay as they stand, smaller where
   they are wider than half the page, and those drawn for a dark page are turned over. ----------------------------------- */
const paper = matchMedia("print");
const chartOnPaper = 504;  // px, as page.css has it
const printing = (yes) => {
  for (const c of charts) {
    if (!c.graph) continue;
    const width = c.graph.size().width;
    c.box.style.width = yes ? width + "px" : "";
    c.box.style.zoom = yes && width > chartOnPaper ? chartOnPaper / width : "";
  }
  root.classList.toggle("turned", yes && root.dataset.theme === "dark");
  root.dataset.theme = yes ? "light" : theme();
};
paper.addEventListener("change", (event) => printing(event.matches));

/* --- a run that goes on ------------------------------------------------------------------------------------------------- */
if (data.running && data.reload > 0) setTimeout(() => location.reload(), 1000 * data.reload);
document.documentElement.dataset.ready = "yes";
