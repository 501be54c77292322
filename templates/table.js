/* The table of all materials: filter, sort, choice of columns and units, kept in the address; CSV of what is shown. */
"use strict";
(() => {
  const { element: make, plain, compare, STANDINGS, NARROW } = handbook;
  const table = document.getElementById("materials-table");
  const tools = document.getElementById("table-tools");
  if (!table || !tools) return;
  const quantities = handbookTables.quantities;
  const PAGE = 200; // rows in the page at once, however many materials there are
  const FIXED = ["name", "formula", "lattice", "electrons"];
  const headRow = table.tHead.rows[0];
  const heads = Object.fromEntries([...headRow.cells].map((head) => [head.dataset.key, head]));
  const drawn = Object.fromEntries([...table.querySelectorAll("thead a")].map((link) => [link.closest("th").dataset.key, link.firstElementChild]));
  const usual = [...headRow.cells].filter((head) => "numeric" in head.dataset).map((head) => head.dataset.key);
  const part = (name) => tools.querySelector(`[name="${name}"]`);
  const [output, conditions, chooser, pager] = ["count", "conditions", "columns", "pager"].map((id) => document.getElementById(`table-${id}`));
  const fresh = () => ({ find: "", element: "", lattice: "", standing: "", where: [], sort: "", down: false, columns: [...usual], units: {}, from: 0 });
  let view = fresh(), materials = null, texts = [], shown = [], turn = 0;

  /* --- columns: a key is a quantity, with "@5" behind it for one point of a list */

  const idOf = (key) => key.split("@")[0];
  const pointOf = (key) => key.slice(idOf(key).length);
  const pointWords = (key) => (quantities[idOf(key)].points.find(([point]) => point === pointOf(key)) || ["", ""])[1];
  const exists = (key) => quantities[idOf(key)]?.points?.some(([point]) => point === pointOf(key));
  const numbersOf = (key) => handbookTables[`columns/${idOf(key)}`][pointOf(key)];
  const unitOf = (id) => quantities[id].units.find(([name]) => name === view.units[id]) || quantities[id].units[0];
  const titleOf = (key) => quantities[idOf(key)].title + (pointWords(key) && `, ${pointWords(key)}`);
  const symbolOf = (key) => drawn[key]?.cloneNode(true) || (quantities[idOf(key)].symbol
    ? make("span", { class: "set" }, handbook.symbol(quantities[idOf(key)].symbol)) : make("span", { text: quantities[idOf(key)].title }));

  /* --- which rows, in which order */

  function chosen() {
    const words = plain(view.find).split(/\s+/).filter(Boolean);
    const bounds = view.where.map(({ key, from, to, standing }) => {
      const { value, standing: standings } = numbersOf(key), factor = unitOf(idOf(key))[2];
      const [low, high] = [from === "" ? -Infinity : Number(from), to === "" ? Infinity : Number(to)];
      const open = from === "" && to === "" && !standing;
      // A bound is what the reader sees: a last digit lost in the change of units must not hide a row.
      const within = (number) => number * factor >= low - 1e-9 * Math.abs(low || 0) && number * factor <= high + 1e-9 * Math.abs(high || 0);
      return (row) => open || (value[row] !== null && (from === "" || within(value[row])) && (to === "" || within(value[row]))
        && (!standing || STANDINGS[standings[row]] === standing));
    });
    const rows = [...materials.slug.keys()].filter((row) => words.every((word) => texts[row].includes(word))
      && (!view.element || materials.elements[row].split(" ").includes(view.element))
      && (!view.lattice || materials.lattice[row] === view.lattice)
      && (!view.standing || materials.standings[row][STANDINGS.indexOf(view.standing)] > 0)
      && bounds.every((fits) => fits(row)));
    return view.sort ? rows.sort(order()) : rows;
  }

  function order() {
    const words = FIXED.includes(view.sort);
    const keys = words ? materials[view.sort] : numbersOf(view.sort).value;
    const gap = (key) => key === null || key === "";
    return (a, b) => (gap(keys[a]) || gap(keys[b]) ? gap(keys[a]) - gap(keys[b])
      : (words ? compare(keys[a], keys[b]) : keys[a] - keys[b]) * (view.down ? -1 : 1)) || a - b;
  }

  /* --- what is on the page */

  async function show(next, remember = true) {
    view = next;
    const own = ++turn;
    table.setAttribute("aria-busy", "true");
    if (remember) handbook.remember(parameters());
    setTools();
    setHeads();
    const keys = [...view.columns, ...view.where.map(({ key }) => key), ...(view.sort && !FIXED.includes(view.sort) ? [view.sort] : [])];
    try {
      [materials] = await Promise.all([handbook.table("materials"), ...keys.map((key) => handbook.table(`columns/${idOf(key)}`))]);
    } catch (error) {
      output.textContent = error.message;
      table.removeAttribute("aria-busy");
      return;
    }
    if (own !== turn) return; // the reader has asked for something else since
    if (!texts.length) texts = materials.slug.map(textOf);
    shown = chosen();
    if (view.from >= shown.length) view.from = 0;
    setRows(shown.slice(view.from, view.from + PAGE));
    setPager();
    const all = materials.slug.length;
    output.textContent = shown.length === all ? `${all} materials` : `${shown.length} of ${all} materials`;
    table.removeAttribute("aria-busy");
  }

  const textOf = (slug, row) => plain([materials.name[row], materials.formula[row], materials.lattice[row], materials.elements[row],
    ...STANDINGS.filter((_, place) => materials.standings[row][place] > 0), materials.draft[row] ? "draft" : ""].join(" "));

  function setRows(rows) {
    const columns = view.columns.map((key) => {
      const { value, spread = [], whole } = numbersOf(key), factor = unitOf(idOf(key))[2];
      const scaled = rows.map((row) => (value[row] === null ? null : value[row] * factor));
      const spreads = rows.map((row) => (spread[row] ?? null) && spread[row] * factor);
      return { scaled, printed: handbook.column(scaled, spreads, powerOf(key), whole) };
    });
    table.tBodies[0].replaceChildren(...rows.map((row, place) => make("tr", {},
      make("th", { scope: "row" }, make("a", { href: `materials/${materials.slug[row]}.html`, text: materials.name[row] }), " ",
        materials.draft[row] ? make("span", { class: "draft", text: "draft" }) : null),
      make("td", {}, handbook.chemical(materials.formula[row])),
      make("td", { text: materials.lattice[row] }),
      make("td", {}, handbook.typeset(materials.electrons[row])),
      ...columns.map(({ scaled, printed }) => make("td", { class: "number", "data-value": scaled[place] ?? undefined }, handbook.typeset(printed[place]))),
      make("td", { class: "counts" }, ...materials.standings[row].flatMap((count, standing) => (count ? [String(count), handbook.standing(standing, true), " "] : []))),
    )));
  }

  // From all materials, so that a head stays while its reader narrows the rows.
  const powerOf = (key) => {
    const column = numbersOf(key);
    return column.whole ? 0 : handbook.columnPower(column.value.map((value) => value && value * unitOf(idOf(key))[2]));
  };

  function setPager() {
    const last = Math.min(view.from + PAGE, shown.length);
    const turnTo = (from) => ({ type: "button", onclick: () => { show({ ...view, from }); table.scrollIntoView(); } });
    pager.hidden = shown.length <= PAGE;
    pager.replaceChildren(make("button", { ...turnTo(Math.max(0, view.from - PAGE)), disabled: !view.from, text: "Previous" }),
      make("span", { text: ` Rows ${view.from + 1} to ${last} of ${shown.length} ` }),
      make("button", { ...turnTo(last), disabled: last >= shown.length, text: "Next" }));
  }

  /* --- heads: what a column is, in which unit, and its order */

  function sortButton(key, title) {
    return make("button", { type: "button", class: "sort", "aria-label": `Sort by ${title}`, onclick: () => {
      show({ ...view, sort: key, down: view.sort === key ? !view.down : !FIXED.includes(key), from: 0 });
    } });
  }

  function unitTool(key) {
    const units = quantities[idOf(key)].units;
    if (units.length === 1) return handbook.typeset(units[0][1]);
    const options = units.map(([name, words]) => make("option", { value: name, text: words, selected: name === unitOf(idOf(key))[0] }));
    return make("select", { class: "unit-choice", "aria-label": `Unit of ${quantities[idOf(key)].title}`,
      onchange: (event) => changeUnit(idOf(key), event.target.value, key) }, ...options);
  }

  function changeUnit(id, name, key) {
    const before = unitOf(id)[2];
    const units = { ...view.units, [id]: name };
    const ratio = (quantities[id].units.find(([one]) => one === name)[2]) / before;
    const scaled = (bound) => (bound === "" ? "" : String(Number((Number(bound) * ratio).toPrecision(10))));
    const where = view.where.map((one) => (idOf(one.key) === id ? { ...one, from: scaled(one.from), to: scaled(one.to) } : one));
    show({ ...view, units, where }).then(() => headRow.querySelector(`[data-key="${CSS.escape(key)}"] select`)?.focus());
  }

  function setHeads() {
    const wanted = [...FIXED, ...view.columns, "standing"];
    const focused = document.activeElement.closest?.("th")?.dataset.key;
    headRow.replaceChildren(...wanted.map((key) => {
      const head = heads[key] ??= make("th", { scope: "col", class: "number", "data-key": key, "data-numeric": true });
      if ("numeric" in head.dataset) setHead(head, key);
      if (view.sort === key) head.setAttribute("aria-sort", view.down ? "descending" : "ascending");
      else head.removeAttribute("aria-sort");
      return head;
    }));
    if (focused) headRow.querySelector(`[data-key="${CSS.escape(focused)}"] button`)?.focus();
  }

  function setHead(head, key) {
    const loaded = handbookTables[`columns/${idOf(key)}`];
    const power = loaded ? powerOf(key) : null;
    if (power === null) handbook.table(`columns/${idOf(key)}`).then(() => setHead(head, key), () => {});
    const link = make("a", { href: `quantities/${idOf(key)}.html`, title: titleOf(key) }, symbolOf(key));
    const point = pointWords(key) && quantities[idOf(key)].points.length > 1 ? make("span", { class: "at", text: pointWords(key) }) : null;
    const over = make("span", { class: "over" }, power ? handbook.typeset(`10${handbook.raised(power)}${NARROW}`) : null, unitTool(key));
    head.replaceChildren(link, sortButton(key, titleOf(key)), ...(point ? [point] : []), over);
  }

  FIXED.forEach((key) => {
    const button = sortButton(key, "");
    button.removeAttribute("aria-label");
    button.className = "";
    button.append(...heads[key].childNodes);
    heads[key].append(button);
  });

  /* --- the tools above the table */

  function setTools() {
    for (const name of ["find", "element", "lattice", "standing"]) if (part(name).value !== view[name]) part(name).value = view[name];
    if (conditions.children.length !== view.where.length) conditions.replaceChildren(...view.where.map(condition));
    [...conditions.children].forEach((line, place) => {
      const one = view.where[place];
      for (const name of ["from", "to", "standing"]) if (line.querySelector(`[name=${name}]`).value !== one[name]) line.querySelector(`[name=${name}]`).value = one[name];
      line.querySelector("[name=key]").value = one.key;
      line.querySelector(".unit").replaceChildren(handbook.typeset(unitOf(idOf(one.key))[1]));
    });
    chooser.querySelectorAll("input").forEach((box) => {
      const key = view.columns.find((one) => idOf(one) === box.value);
      const points = box.closest("li").querySelector("select");
      box.checked = Boolean(key);
      if (points && key) points.value = pointOf(key);
    });
  }

  const sections = () => Object.entries(Object.groupBy(Object.keys(quantities), (id) => quantities[id].section));

  function condition(one, place) {
    const change = (event) => {
      const where = view.where.map((other, index) => (index === place ? { ...other, [event.target.name]: event.target.value } : other));
      show({ ...view, where, from: 0 });
    };
    const groups = sections().map(([title, ids]) => make("optgroup", { label: title }, ...ids.flatMap((id) => quantities[id].points.map(([point]) =>
      make("option", { value: id + point, text: quantities[id].points.length > 1 ? titleOf(id + point) : quantities[id].title })))));
    const bound = (name, label) => make("label", {}, `${label} `, make("input", { name, type: "number", step: "any", inputmode: "decimal", oninput: change }));
    return make("div", { class: "condition-line", role: "group", "aria-label": `Range ${place + 1}` },
      make("label", { class: "which" }, "Quantity ", make("select", { name: "key", onchange: change }, ...groups)), bound("from", "from"), bound("to", "to"),
      make("span", { class: "unit" }),
      make("label", {}, "standing ", make("select", { name: "standing", onchange: change }, make("option", { value: "", text: "any" }),
        ...STANDINGS.map((word) => make("option", { value: word, text: word })))),
      make("button", { type: "button", text: "Remove", "aria-label": `Remove range ${place + 1}`, onclick: () => {
        conditions.replaceChildren();
        show({ ...view, where: view.where.filter((_, index) => index !== place), from: 0 });
        document.getElementById("add-range").focus();
      } }));
  }

  function buildChooser() {
    const line = (id) => {
      const points = quantities[id].points;
      const box = make("input", { type: "checkbox", value: id, onchange: choose });
      const select = points.length > 1 ? make("select", { "aria-label": `${quantities[id].title}: at`, onchange: choose },
        ...points.map(([point, words]) => make("option", { value: point, text: words }))) : null;
      return make("li", {}, make("label", {}, box, make("span", {}, quantities[id].symbol ? symbolOf(id) : null, ` ${quantities[id].title}`)), select);
    };
    const choose = () => {
      const ticked = [...chooser.querySelectorAll("input:checked")].map((box) =>
        box.value + (box.closest("li").querySelector("select")?.value ?? quantities[box.value].points[0][0]));
      // Columns keep their order; a new one comes last.
      const kept = view.columns.map((key) => ticked.find((one) => idOf(one) === idOf(key))).filter(Boolean);
      show({ ...view, columns: [...kept, ...ticked.filter((key) => !kept.includes(key))] });
    };
    chooser.append(...sections().map(([title, ids]) => make("fieldset", {}, make("legend", { text: title }), make("ul", {}, ...ids.map(line)))));
  }

  /* --- the address, and the file */

  function parameters() {
    const state = new URLSearchParams();
    for (const name of ["find", "element", "lattice", "standing"]) if (view[name]) state.set(name, view[name]);
    for (const { key, from, to, standing } of view.where) state.append("where", [key, from, to, standing].join(":"));
    if (view.sort) state.set("sort", (view.down ? "-" : "") + view.sort);
    if (view.columns.join() !== usual.join()) state.set("columns", view.columns.join());
    const units = Object.entries(view.units).filter(([id, name]) => name !== quantities[id].units[0][0]);
    if (units.length) state.set("units", units.map(([id, name]) => `${id}:${name}`).join());
    if (view.from) state.set("from", view.from + 1);
    return state;
  }

  /* What an address says, apart from what this edition does not have. */
  function fromAddress() {
    const state = handbook.state(), read = fresh(), number = (text) => (text !== "" && Number.isFinite(Number(text)) ? text : "");
    for (const name of ["find", "element", "lattice", "standing"]) read[name] = state.get(name) || "";
    for (const name of ["element", "lattice", "standing"]) if (![...part(name).options].some((option) => option.value === read[name])) read[name] = "";
    const sort = (state.get("sort") || "").replace(/^-/, "");
    if (FIXED.includes(sort) || exists(sort)) Object.assign(read, { sort, down: state.get("sort").startsWith("-") });
    if (state.has("columns")) read.columns = [...new Set(state.get("columns").split(","))].filter(exists);
    for (const pair of (state.get("units") || "").split(",")) {
      const [id, name] = pair.split(":");
      if (quantities[id]?.units?.some(([one]) => one === name)) read.units[id] = name;
    }
    for (const text of state.getAll("where")) {
      const [key, from = "", to = "", standing = ""] = text.split(":");
      if (exists(key)) read.where.push({ key, from: number(from), to: number(to), standing: STANDINGS.includes(standing) ? standing : "" });
    }
    read.from = Math.max(0, (Number.parseInt(state.get("from"), 10) || 1) - 1);
    return read;
  }

  async function save() {
    await show(view);
    const tidy = (value, factor) => (value === null || value === undefined ? "" : Number((value * factor).toPrecision(12)));
    const head = ["material", "formula", "lattice", "electrons"];
    for (const key of view.columns) {
      const unit = unitOf(idOf(key))[0];
      head.push(`${key} / ${unit}`, `u(${key}) / ${unit}`, `standing of ${key}`);
    }
    const lines = shown.map((row) => [materials.name[row], materials.formula[row], materials.lattice[row], materials.electrons[row],
      ...view.columns.flatMap((key) => {
        const { value, spread = [], standing } = numbersOf(key), factor = unitOf(idOf(key))[2];
        return [tidy(value[row], factor), tidy(spread[row], factor), STANDINGS[standing[row]] || ""];
      })]);
    handbook.download("materials.csv", "text/csv;charset=utf-8", [head, ...lines].map((line) => `${line.map(handbook.csvCell).join()}\n`).join(""));
  }

  for (const name of ["find", "element", "lattice", "standing"]) part(name).addEventListener("input", (event) => show({ ...view, [name]: event.target.value, from: 0 }));
  document.getElementById("add-range").addEventListener("click", () => {
    const key = view.columns[0] || Object.keys(quantities)[0];
    show({ ...view, where: [...view.where, { key, from: "", to: "", standing: "" }] });
    conditions.lastElementChild.querySelector("select").focus();
  });
  document.getElementById("save-table").addEventListener("click", save);
  document.getElementById("reset-table").addEventListener("click", () => { conditions.replaceChildren(); show(fresh()); });
  addEventListener("hashchange", () => { conditions.replaceChildren(); show(fromAddress(), false); });
  buildChooser();
  tools.hidden = false;
  // The table as the press set it stands until its reader asks for another view.
  if (location.hash.length > 1 && location.hash.includes("=")) show(fromAddress(), false);
  else { setHeads(); setTools(); output.textContent = `${tools.dataset.count} materials`; }
})();
