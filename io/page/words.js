/* What all parts share: elements, numbers in words, what a reader has set, light and dark. No text of the run becomes
   markup: everything goes through textContent and attributes. The parts stand in one function, in this order: words,
   chart, field, history, page. */
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
