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
  /* States along a branch may each have a shell of their own. */
  const geometryAt = (k) => (fields.geometries ? fields.geometries[k] : fields.geometry);
  let shell = new Shell(geometryAt(0));
  const canvas = at("shell"), decoded = new Map();
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
  const reshape = () => {
    if (shell.g === geometryAt(frame)) return;
    shell = new Shell(geometryAt(frame));
    size();
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
    reshape();
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
  reshape();
  size();
  describe();
}
if (data.missing) {
  at("missing").hidden = false;
  at("missing").textContent = "Fields and profiles are not shown. " + data.missing;
}
at("field-body").hidden = !fields;
