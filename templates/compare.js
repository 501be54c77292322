/* Two to six materials side by side: numbers by section with their ratios, and curves laid over each other. */
"use strict";
(() => {
  const { element: make, plain } = handbook;
  const [quantities, materials] = [handbookTables.quantities, handbookTables.materials];
  const MOST = 6, CHOICES = 30, FAR = 0.1;
  const LOGARITHMIC = ["resistivity"];
  const page = document.getElementById("compare");
  const [add, differing] = ["add", "differing"].map((name) => page.querySelector(`[name=${name}]`));
  const [names, chosenList, said, table, charts] = ["names", "chosen", "said", "table", "charts"].map((id) => document.getElementById(`compare-${id}`));
  let chosen = [], turn = 0;

  const rowOf = (slug) => materials.slug.indexOf(slug);
  const nameOf = (slug) => materials.name[rowOf(slug)];

  /* The material that a reader means: by name, formula or the beginning of a name. */
  function meant(text) {
    const words = plain(text.trim());
    if (!words) return undefined;
    const all = materials.slug.filter((slug) => !chosen.includes(slug));
    const ways = [(slug) => plain(nameOf(slug)) === words, (slug) => plain(materials.formula[rowOf(slug)]) === words, (slug) => plain(nameOf(slug)).startsWith(words)];
    return ways.map((way) => all.find(way)).find(Boolean);
  }

  function offer() {
    const words = plain(add.value.trim());
    const fitting = materials.slug.filter((slug) => !chosen.includes(slug) && plain(`${nameOf(slug)} ${materials.formula[rowOf(slug)]}`).includes(words));
    names.replaceChildren(...fitting.slice(0, CHOICES).map((slug) => make("option", { value: nameOf(slug), label: materials.formula[rowOf(slug)] })));
  }

  async function show(next, words) {
    chosen = next;
    const own = ++turn;
    const state = new URLSearchParams();
    if (chosen.length) state.set("materials", chosen.join());
    if (differing.checked) state.set("differing", "yes");
    handbook.remember(state);
    chosenList.replaceChildren(...chosen.map((slug, order) => make("li", {}, handbook.chart.key(order),
      make("a", { href: `materials/${slug}.html`, text: nameOf(slug) }),
      make("button", { type: "button", text: "Remove", "aria-label": `Remove ${nameOf(slug)}`, onclick: () => { show(chosen.filter((one) => one !== slug), `${nameOf(slug)} removed.`); add.focus(); } }))));
    offer();
    let own_tables;
    try {
      own_tables = await Promise.all(chosen.map((slug) => handbook.table(`materials/${slug}`)));
    } catch (error) {
      said.textContent = error.message;
      return;
    }
    if (own !== turn) return;
    const enough = chosen.length > 1;
    for (const id of ["numbers", "curves"]) document.getElementById(`compare-${id}`).hidden = !enough;
    said.textContent = words || (enough ? "" : chosen.length ? "Add a second material." : "Add the first of two to six materials.");
    if (enough) {
      setNumbers(own_tables);
      setCurves(own_tables);
    }
  }

  /* --- numbers */

  function setNumbers(tables) {
    table.tHead.rows[0].replaceChildren(make("th", { scope: "col", text: "Quantity" }), make("th", { scope: "col", text: "Unit" }),
      ...chosen.map((slug) => make("th", { scope: "col" }, make("a", { href: `materials/${slug}.html`, text: nameOf(slug) }))));
    const sections = Object.groupBy(Object.keys(quantities), (id) => quantities[id].section);
    const bodies = Object.entries(sections).map(([title, ids]) => {
      const rows = ids.flatMap((id) => quantities[id].points.map(([point, words]) => numberRow(id, point, words, tables))).filter(Boolean);
      return rows.length && make("tbody", {}, make("tr", { class: "group" }, make("th", { scope: "rowgroup", colspan: chosen.length + 2, text: title })), ...rows);
    });
    table.replaceChildren(...table.querySelectorAll("caption, thead"), ...bodies.filter(Boolean));
  }

  function numberRow(id, point, words, tables) {
    const { title, symbol, units, points } = quantities[id];
    const [, unit, factor] = units[0];
    const stated = tables.map((one) => one.quantities[id]?.[point]);
    const present = stated.filter(Boolean);
    if (!present.length) return null;
    const ratios = stated.map((one) => (one && stated[0] && stated[0][0] ? one[0] / stated[0][0] : null));
    if (differing.checked && !ratios.slice(1).some((ratio) => ratio === null || Math.abs(ratio - 1) > FAR)) return null;
    const whole = present.every((one) => one[3]);
    const power = whole ? 0 : handbook.columnPower(present.map((one) => one[0] * factor));
    const over = make("td", { class: "unit" }, power ? handbook.typeset(`10${handbook.raised(power)}${handbook.NARROW}`) : null, handbook.typeset(unit));
    return make("tr", {},
      make("th", { scope: "row" }, make("span", { class: "named" }, make("span", { class: "set" }, handbook.symbol(symbol)),
        make("span", {}, make("a", { href: `quantities/${id}.html`, text: title }), words && points.length > 1 ? `, ${words}` : null))),
      over, ...stated.map((one, order) => numberCell(one, ratios[order], order, id, factor * 10 ** -power, whole)));
  }

  function numberCell(one, ratio, order, id, scale, whole) {
    if (!one) return make("td", { class: "number" }, make("span", { class: "gap", text: "absent" }));
    const [value, spread, standing] = one;
    const number = handbook.typeset(handbook.words(handbook.printed(value * scale, spread * scale, whole)));
    const mark = handbook.STANDINGS[standing] === "unchecked" ? null : handbook.standing(standing, true);
    let beside = null;
    if (order && ratio !== null) {
      const sign = ratio > 1 + FAR ? "▲" : ratio < 1 - FAR ? "▼" : "";
      const words = handbook.words(handbook.printed(Number(ratio.toPrecision(3))));
      beside = make("span", { class: sign ? "ratio far" : "ratio" }, handbook.typeset(`×${handbook.NARROW}${words}${sign && ` ${sign}`}`));
    }
    return make("td", { class: "number" }, make("a", { class: "quiet", href: `materials/${chosen[order]}.html#${id}` }, number), mark, beside);
  }

  /* --- curves */

  function setCurves(tables) {
    const kinds = [...new Set(tables.flatMap((one) => Object.keys(one.curves)))];
    charts.replaceChildren(...kinds.map((kind) => {
      const drawn = chosen.map((slug, order) => ({ name: nameOf(slug), order, ...tables[order].curves[kind] })).filter((one) => one.x);
      const { title, names: axes } = drawn[0];
      // States per area and states per volume have no axis in common.
      const having = drawn.filter((one) => one.names.join() === axes.join());
      // A curve keeps the line of its material even where another material has none.
      const curves = chosen.map((slug, order) => having.find((one) => one.order === order) || { name: nameOf(slug), x: [], y: [] });
      const picture = handbook.chart.chart({ id: `chart-${kind}`, title, names: axes, curves, logarithmic: LOGARITHMIC.includes(kind) });
      const without = curves.filter((one) => !one.x.length).map((one) => one.name);
      return make("figure", {}, picture, make("figcaption", {}, make("b", { text: `${title}. ` }),
        ...having.flatMap((one, place) => [handbook.chart.key(one.order), ` ${one.name}${place < having.length - 1 ? " " : ". "}`]), having.some((one) => one.level) ? "Dots: Fermi level. " : null, without.length ? `Not in this picture: ${without.join(", ")}.` : null));
    }));
    document.getElementById("compare-curves").hidden = !kinds.length;
  }

  /* --- what a reader does */

  function take() {
    const slug = meant(add.value);
    if (chosen.length >= MOST) said.textContent = `${MOST} materials stand here already; remove one first.`;
    else if (!slug) said.textContent = add.value.trim() ? `No further material is called “${add.value.trim()}”.` : "Write the name or formula of a material.";
    else {
      add.value = "";
      show([...chosen, slug], `${nameOf(slug)} added.`);
    }
  }

  function fromAddress() {
    const state = handbook.state();
    differing.checked = state.get("differing") === "yes";
    show([...new Set((state.get("materials") || "").split(","))].filter((slug) => rowOf(slug) >= 0).slice(0, MOST));
  }

  document.getElementById("compare-add").addEventListener("click", take);
  add.addEventListener("keydown", (event) => { if (event.key === "Enter") take(); });
  add.addEventListener("input", offer);
  differing.addEventListener("change", () => show(chosen));
  addEventListener("hashchange", fromAddress);
  page.hidden = false;
  fromAddress();
})();
