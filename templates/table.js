/* The table of all materials: filter by text, sort by column, keep the view in the address so that it can be sent to someone. */
"use strict";
(() => {
  const table = document.getElementById("materials-table");
  const tools = document.getElementById("table-tools");
  if (!table || !tools) return;
  const body = table.tBodies[0];
  const rows = [...body.rows];
  const heads = [...table.tHead.rows[0].cells];
  const fold = (text) => text.normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase();
  const texts = new Map(rows.map((row) => [row, fold(row.textContent)]));
  const compare = new Intl.Collator(document.documentElement.lang || "en", { numeric: true }).compare;
  let view = { find: "", sort: "", down: false };

  const label = document.createElement("label");
  label.textContent = "Find material, formula, lattice or standing: ";
  const input = document.createElement("input");
  input.type = "search";
  input.autocomplete = "off";
  label.append(input);
  const output = document.createElement("output");
  output.setAttribute("aria-live", "polite");
  tools.append(label, output);
  tools.hidden = false;

  heads.forEach((head) => {
    if (head.dataset.key === "standing") return;
    const button = document.createElement("button");
    button.type = "button";
    const link = head.querySelector("a");
    if (link) {
      // A number's head keeps its link to the quantity; the button stands beside it.
      button.setAttribute("aria-label", `Sort by ${link.title}`);
      link.after(button);
    } else {
      button.append(...head.childNodes);
      head.append(button);
    }
    button.addEventListener("click", () => {
      const numeric = "numeric" in head.dataset;
      const same = view.sort === head.dataset.key;
      show({ ...view, sort: head.dataset.key, down: same ? !view.down : numeric });
    });
  });

  const keyOf = (row, column, numeric) => {
    const cell = row.cells[column];
    if (!numeric) return cell.textContent.trim();
    return cell.dataset.value === undefined ? null : Number(cell.dataset.value);
  };

  const order = (column, numeric, down) => (first, second) => {
    const [a, b] = [keyOf(first, column, numeric), keyOf(second, column, numeric)];
    if (a === null || b === null || a === "" || b === "") return (a === null || a === "") - (b === null || b === "");
    return (numeric ? a - b : compare(a, b)) * (down ? -1 : 1);
  };

  function show(next, remember = true) {
    view = next;
    const column = heads.findIndex((head) => head.dataset.key === view.sort);
    const words = fold(view.find).split(/\s+/).filter(Boolean);
    const sorted = column < 0 ? rows : [...rows].sort(order(column, "numeric" in heads[column].dataset, view.down));
    let shown = 0;
    sorted.forEach((row) => {
      row.hidden = !words.every((word) => texts.get(row).includes(word));
      shown += !row.hidden;
    });
    body.append(...sorted);
    heads.forEach((head, index) => {
      if (index === column) head.setAttribute("aria-sort", view.down ? "descending" : "ascending");
      else head.removeAttribute("aria-sort");
    });
    if (input.value !== view.find) input.value = view.find;
    output.textContent = shown === rows.length ? `${rows.length} materials` : `${shown} of ${rows.length} materials`;
    if (remember) history.replaceState(null, "", address());
  }

  function address() {
    const state = new URLSearchParams();
    if (view.find) state.set("find", view.find);
    if (view.sort) state.set("sort", (view.down ? "-" : "") + view.sort);
    return `#${state}`;
  }

  function fromAddress() {
    const state = new URLSearchParams(location.hash.slice(1));
    const sort = state.get("sort") || "";
    show({ find: state.get("find") || "", sort: sort.replace(/^-/, ""), down: sort.startsWith("-") }, false);
  }

  input.addEventListener("input", () => show({ ...view, find: input.value }));
  addEventListener("hashchange", fromAddress);
  fromAddress();
})();
