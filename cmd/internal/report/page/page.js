"use strict";
// Sorting, the picture of the front and one sheet at a time. Everything it
// shows stands in the page already: the table is the data.
(() => {
  const root = document.documentElement;
  const table = document.getElementById("table");
  const sheets = [...document.querySelectorAll(".sheet")];
  root.classList.add("js");

  // One sheet at a time; the address says which.
  const openSheet = (id) => {
    for (const s of sheets) s.classList.toggle("open", s.id === id);
    for (const a of document.querySelectorAll(".picker a")) {
      if (a.hash === "#" + id) a.setAttribute("aria-current", "true");
      else a.removeAttribute("aria-current");
    }
  };
  const follow = () => {
    const sheet = sheets.find((s) => "#" + s.id === location.hash);
    if (!sheet) return;
    openSheet(sheet.id);
    sheet.focus({ preventScroll: true });
    sheet.scrollIntoView();
  };
  if (sheets.length) {
    const note = (flag) => table.querySelector(`tr[data-${flag}][data-sheet]`);
    const first = note("chosen") ?? note("knee");
    openSheet(first ? "sheet-" + first.dataset.id : sheets[0].id);
    addEventListener("hashchange", follow);
    follow();
  }
  const closed = [];
  addEventListener("beforeprint", () => {
    for (const d of document.querySelectorAll("details:not([open])")) { d.open = true; closed.push(d); }
  });
  addEventListener("afterprint", () => { for (const d of closed.splice(0)) d.open = false; });
  if (!table) return;

  // The table: columns by name, rows with their values.
  const heads = [...table.tHead.rows[0].cells];
  const columns = heads.map((th, i) => ({
    i, th, name: th.dataset.name, number: "number" in th.dataset,
    label: th.querySelector("span").textContent, unit: th.querySelector("small")?.textContent ?? "",
  })).filter((c) => c.name);
  const column = (name) => columns.find((c) => c.name === name);
  const rows = [...table.tBodies[0].rows];
  const value = (row, c) => {
    const v = row.cells[c.i].dataset.v;
    return v === "" ? NaN : c.number ? Number(v) : v;
  };
  const text = (row, c) => row.cells[c.i].textContent + (c.unit && row.cells[c.i].textContent !== "–" ? " " + c.unit : "");

  // Sorting.
  for (const c of columns) {
    // No real button: browsers leave those out of a header that is repeated
    // on paper.
    const button = document.createElement("span");
    button.className = "sorter";
    button.setAttribute("role", "button");
    button.tabIndex = 0;
    button.append(...c.th.childNodes);
    c.th.append(button);
    button.addEventListener("keydown", (e) => { if (e.key === "Enter" || e.key === " ") { e.preventDefault(); button.click(); } });
    button.addEventListener("click", () => {
      const down = c.th.getAttribute("aria-sort") === "ascending";
      for (const o of columns) o.th.removeAttribute("aria-sort");
      c.th.setAttribute("aria-sort", down ? "descending" : "ascending");
      const key = new Map(rows.map((r) => [r, value(r, c)]));
      const none = (v) => typeof v === "number" && Number.isNaN(v);
      const order = [...rows].sort((a, b) => {
        const x = key.get(a), y = key.get(b);
        if (none(x) || none(y)) return none(x) - none(y);
        const d = c.number ? x - y : x.localeCompare(y);
        return down ? -d : d;
      });
      table.tBodies[0].append(...order);
    });
  }

  // The picture.
  const plot = document.getElementById("plot");
  const live = document.getElementById("live");
  const picked = document.getElementById("picked");
  const choices = columns.filter((c) => c.number && c.name !== "seed" && rows.some((r) => !Number.isNaN(value(r, c))));
  // Lengths and masses are read in millimetres and grams.
  const factor = (c) => (c.unit === "mm" || c.unit === "g" ? 1000 : 1);
  const axis = { x: column(plot.dataset.x), y: column(plot.dataset.y) };
  const selects = {};
  for (const side of ["y", "x"]) {
    const label = document.createElement("label");
    label.append(side === "y" ? "upwards" : "to the right");
    const select = document.createElement("select");
    for (const c of choices) select.add(new Option(c.label + (c.unit ? ", " + c.unit : ""), c.name, false, c === axis[side]));
    select.addEventListener("change", () => { axis[side] = column(select.value); draw(); });
    selects[side] = select;
    label.append(select);
    document.getElementById("axes").append(label);
  }

  const svgns = "http://www.w3.org/2000/svg";
  const el = (parent, name, attributes, content) => {
    const e = document.createElementNS(svgns, name);
    for (const [k, v] of Object.entries(attributes)) e.setAttribute(k, v);
    if (content !== undefined) e.textContent = content;
    parent.append(e);
    return e;
  };
  const step = (span, most) => {
    for (let p = 10 ** (Math.floor(Math.log10(span)) - 2); ; p *= 10)
      for (const m of [1, 2, 5]) if (span / (m * p) + 1 <= most + 1e-9) return m * p;
  };
  const scaleOf = (values, most) => {
    let low = Math.min(...values), high = Math.max(...values);
    if (high - low < 1e-9 * Math.max(Math.abs(low), 1e-3)) { const room = Math.max(Math.abs(low) * 0.05, 1e-3); low -= room; high += room; }
    const s = step(high - low, most);
    low = Math.floor(low / s + 1e-9) * s;
    high = Math.ceil(high / s - 1e-9) * s;
    const ticks = [];
    for (let n = Math.round(low / s); n * s <= high + 1e-9 * s; n++) ticks.push(n * s);
    const digits = Math.max(0, -Math.floor(Math.log10(s) + 1e-9));
    return { low, high, ticks, text: (t) => (Math.abs(t) < s / 2 ? 0 : t).toFixed(digits).replace("-", "−") };
  };

  const describe = (row) => {
    picked.replaceChildren();
    if (!row) return;
    const name = document.createElement("b");
    name.textContent = row.dataset.id;
    const words = [row.cells[1].textContent, ...columns.filter((c) => c.name !== "id" && (!c.th.classList.contains("extra") || c === axis.x || c === axis.y)).map((c) => c.label + " " + text(row, c))];
    picked.append(name, " ", words.filter(Boolean).join(" · "));
    if (!("sheet" in row.dataset)) picked.append(" · no sheet in this report: turnwise simulate shows it");
  };
  let lit = null;
  const light = (row) => {
    for (const e of document.querySelectorAll(".lit")) e.classList.remove("lit");
    lit = row;
    describe(row);
    if (!row) return;
    row.classList.add("lit");
    live.querySelector('.dot[data-id="' + row.dataset.id + '"]')?.classList.add("lit");
  };
  const choose = (row) => {
    light(row);
    if (!("sheet" in row.dataset)) return row.scrollIntoView({ block: "nearest" });
    const hash = "#sheet-" + row.dataset.id;
    if (location.hash === hash) follow();
    else location.hash = hash;
  };

  const draw = () => {
    const w = Math.max(280, live.clientWidth), h = Math.round(Math.min(460, Math.max(290, w * 0.55)));
    const xs = rows.map((r) => value(r, axis.x) * factor(axis.x)), ys = rows.map((r) => value(r, axis.y) * factor(axis.y));
    const seen = rows.map((_, i) => i).filter((i) => !Number.isNaN(xs[i]) && !Number.isNaN(ys[i]));
    live.replaceChildren();
    const svg = el(live, "svg", { viewBox: `0 0 ${w} ${h}`, width: w, height: h, role: "group", "font-size": 12, fill: "#1b2733" });
    const named = (c) => c.label + (c.unit ? ", " + c.unit : "");
    svg.setAttribute("aria-label", `${named(axis.y)} against ${named(axis.x)}; arrow keys move from design to design, Enter opens its sheet`);
    if (!seen.length) return;
    const X = scaleOf(seen.map((i) => xs[i]), w < 500 ? 5 : 9), Y = scaleOf(seen.map((i) => ys[i]), 7);
    const left = 16 + 7 * Math.max(...Y.ticks.map((t) => Y.text(t).length)), right = w - 18, top = 26, bottom = h - 42;
    const px = (v) => left + ((right - left) * (v - X.low)) / (X.high - X.low);
    const py = (v) => bottom - ((bottom - top) * (v - Y.low)) / (Y.high - Y.low);
    for (const t of X.ticks) {
      el(svg, "line", { x1: px(t), x2: px(t), y1: top, y2: bottom, stroke: "#dfe4e8" });
      el(svg, "text", { x: px(t), y: bottom + 16, "text-anchor": "middle", fill: "#55626e" }, X.text(t));
    }
    for (const t of Y.ticks) {
      el(svg, "line", { x1: left, x2: right, y1: py(t), y2: py(t), stroke: "#dfe4e8" });
      el(svg, "text", { x: left - 6, y: py(t) + 4, "text-anchor": "end", fill: "#55626e" }, Y.text(t));
    }
    el(svg, "rect", { x: left, y: top, width: right - left, height: bottom - top, fill: "none", stroke: "#9aa5af" });
    el(svg, "text", { x: (left + right) / 2, y: h - 6, "text-anchor": "middle", "font-size": 13 }, named(axis.x));
    el(svg, "text", { x: 4, y: 14, "font-size": 13 }, named(axis.y));
    const order = [...seen].sort((a, b) => xs[a] - xs[b] || ys[a] - ys[b]);
    const dots = order.map((i, k) => {
      const row = rows[i], x = px(xs[i]), y = py(ys[i]), sheet = "sheet" in row.dataset;
      const g = el(svg, "g", { class: "dot", "data-id": row.dataset.id, tabindex: k ? -1 : 0, role: "button" });
      g.setAttribute("aria-label", `${row.dataset.id}, ${named(axis.y)} ${text(row, axis.y)}, ${named(axis.x)} ${text(row, axis.x)}${row.cells[1].textContent ? ", " + row.cells[1].textContent : ""}${sheet ? ", has a sheet" : ""}`);
      el(g, "circle", { class: "halo", cx: x, cy: y, r: 12, fill: "#fff", "fill-opacity": 0, stroke: "#fff", "stroke-opacity": 0, "stroke-width": 2 });
      if ("chosen" in row.dataset) el(g, "rect", { x: x - 8, y: y - 8, width: 16, height: 16, fill: "#fff", stroke: "#c24a00", "stroke-width": 1.5 });
      else if ("knee" in row.dataset) el(g, "path", { d: `M${x - 10} ${y}L${x} ${y - 10} ${x + 10} ${y} ${x} ${y + 10}Z`, fill: "#fff", stroke: "#1b2733", "stroke-width": 1.5 });
      el(g, "circle", { cx: x, cy: y, r: 4.6, fill: sheet ? "#005a9c" : "#fff", stroke: "#005a9c", "stroke-width": 1.5 });
      const label = ["chosen", "knee"].filter((n) => n in row.dataset).join(", ");
      if (label) {
        const end = x + 14 + 7 * label.length > right;
        el(g, "text", { x: x + (end ? -14 : 14), y: Math.min(y + 16, bottom - 4), "text-anchor": end ? "end" : "start", "font-size": 13, stroke: "#fff", "stroke-width": 4, "paint-order": "stroke" }, label);
      }
      g.addEventListener("pointerenter", () => light(row));
      g.addEventListener("focus", () => light(row));
      g.addEventListener("click", () => choose(row));
      g.addEventListener("keydown", (e) => {
        const to = { ArrowRight: k + 1, ArrowUp: k + 1, ArrowLeft: k - 1, ArrowDown: k - 1, Home: 0, End: order.length - 1 }[e.key];
        if (e.key === "Enter" || e.key === " ") { e.preventDefault(); choose(row); }
        if (to === undefined || !dots[to]) return;
        e.preventDefault();
        g.setAttribute("tabindex", -1);
        dots[to].setAttribute("tabindex", 0);
        dots[to].focus();
      });
      return g;
    });
    // Those with a sheet and those of note lie on top.
    for (const flag of ["sheet", "knee", "chosen"]) for (const k of order.keys()) if (flag in rows[order[k]].dataset) svg.append(dots[k]);
    if (lit) light(lit);
    else picked.textContent = "Point at a design to read it; click it, or press Enter, for its sheet. Solid points have one.";
  };
  for (const row of rows) row.addEventListener("pointerenter", () => light(row));
  let width = 0;
  new ResizeObserver(() => { if (live.clientWidth && live.clientWidth !== width) { width = live.clientWidth; draw(); } }).observe(live);
  draw();
})();
