/* The periodic table shaded by a quantity or by its standing; arrow keys go from element to element. */
"use strict";
(() => {
  const { element: make, STANDINGS, NARROW } = handbook;
  const quantities = handbookTables.quantities;
  const tools = document.getElementById("shade-tools");
  const grid = document.getElementById("periodic");
  const [caption, legend] = ["shade-caption", "shade-legend"].map((id) => document.getElementById(id));
  const places = [...document.querySelectorAll(".element[data-row]")];
  const select = tools.querySelector("select");
  const STEPS = 7;
  const USUAL = "fermi_energy";
  let turn = 0;

  const idOf = (key) => key.split("@")[0];
  const pointOf = (key) => key.slice(idOf(key).length);
  const exists = (key) => quantities[idOf(key)]?.points?.some(([point]) => point === pointOf(key));
  const sections = Object.groupBy(Object.keys(quantities), (id) => quantities[id].section);
  select.append(make("option", { value: "", text: "nothing" }), ...Object.entries(sections).map(([title, ids]) =>
    make("optgroup", { label: title }, ...ids.flatMap((id) => quantities[id].points.map(([point, words]) =>
      make("option", { value: id + point, text: quantities[id].title + (words && quantities[id].points.length > 1 ? `, ${words}` : "") }))))));

  /* Steps that hold equally many materials: equal values share a step, and a few far ones do not take the whole scale. */
  function scale(values) {
    const sorted = [...values].sort((a, b) => a - b);
    const stepOf = (value) => Math.floor((sorted.indexOf(value) * STEPS) / sorted.length) + 1;
    const bounds = Array.from({ length: STEPS }, (_, step) => sorted.filter((value) => stepOf(value) === step + 1));
    return { stepOf, bounds: bounds.map((some) => [some[0], some.at(-1)]) };
  }

  /* Three digits, the last one too where it is a nought. */
  const brief = (value) => {
    const digits = value.toPrecision(3);
    return /^-?[\d.]+$/.test(digits) ? digits.replace("-", "\u2212") : handbook.words(handbook.printed(Number(digits)));
  };

  function clear() {
    for (const place of places) {
      place.className = place.className.replace(/ (step-\d|of-\w+|without)/g, "");
      place.querySelector(".shade-value").replaceChildren();
    }
    legend.replaceChildren();
    caption.replaceChildren();
  }

  async function shade(key, show) {
    const own = ++turn;
    handbook.remember(new URLSearchParams(key === USUAL && show === "value" ? {} : { by: key, ...(show === "standing" ? { show } : {}) }));
    select.value = key;
    tools.querySelector(`[value=${show}]`).checked = true;
    if (!key) return clear();
    let column;
    try {
      column = (await handbook.table(`columns/${idOf(key)}`))[pointOf(key)];
    } catch (error) {
      caption.textContent = error.message;
      return undefined;
    }
    if (own !== turn) return undefined;
    clear();
    return show === "value" ? byValue(key, column) : byStanding(key, column);
  }

  function byValue(key, column) {
    const [, unit, factor] = quantities[idOf(key)].units[0];
    const numbers = places.map((place) => column.value[place.dataset.row]);
    const stated = numbers.filter((value) => value !== null).map((value) => value * factor);
    const { stepOf, bounds } = scale(stated);
    const power = handbook.columnPower(stated), ten = 10 ** -power;
    places.forEach((place, index) => {
      if (numbers[index] === null) return place.classList.add("without");
      const value = numbers[index] * factor;
      place.classList.add(`step-${stepOf(value)}`);
      place.querySelector(".shade-value").append(handbook.typeset(brief(value * ten)));
      return undefined;
    });
    const over = [power ? `10${handbook.raised(power)}` : "", unit].filter(Boolean).join(NARROW);
    caption.append(quantities[idOf(key)].title, over ? ", in " : "", handbook.typeset(over), ". Each step holds equally many materials.");
    legend.append(...bounds.flatMap(([low, high], index) => (low === undefined ? [] : [make("li", {}, make("span", { class: `swatch step-${index + 1}` }),
      handbook.typeset(low === high ? brief(low * ten) : `${brief(low * ten)} to ${brief(high * ten)}`))])));
  }

  function byStanding(key, column) {
    const seen = new Set();
    places.forEach((place) => {
      const standing = STANDINGS[column.standing[place.dataset.row]];
      if (!standing) return place.classList.add("without");
      seen.add(standing);
      place.classList.add(`of-${standing}`);
      place.querySelector(".shade-value").append(handbook.standing(STANDINGS.indexOf(standing), true));
      return undefined;
    });
    caption.append(`Standing of: ${quantities[idOf(key)].title}.`);
    legend.append(...STANDINGS.filter((word) => seen.has(word)).map((word) => make("li", {}, make("span", { class: `swatch of-${word}` }), handbook.standing(STANDINGS.indexOf(word)))));
  }

  /* The next element with a sheet in a direction; Tab goes through them as through any links. */
  grid.addEventListener("keydown", (event) => {
    const [across, down] = { ArrowRight: [1, 0], ArrowLeft: [-1, 0], ArrowDown: [0, 1], ArrowUp: [0, -1] }[event.key] || [0, 0];
    const cell = event.target.closest("td");
    if (!cell || !(across || down)) return;
    event.preventDefault();
    const turned = getComputedStyle(grid).direction === "rtl" ? -across : across;
    let [row, column] = [cell.parentElement.rowIndex, cell.cellIndex];
    while (grid.rows[row += down]?.cells[column += turned]) {
      const link = grid.rows[row].cells[column].querySelector("a");
      if (link) return link.focus();
    }
  });

  function fromAddress() {
    const state = handbook.state();
    const by = state.get("by");
    shade(by === "" || exists(by || "") ? by : exists(USUAL) ? USUAL : "", state.get("show") === "standing" ? "standing" : "value");
  }

  tools.addEventListener("change", () => shade(select.value, tools.querySelector("[name=show]:checked").value));
  addEventListener("hashchange", fromAddress);
  tools.hidden = false;
  fromAddress();
})();
