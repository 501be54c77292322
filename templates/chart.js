/* Curves of several materials in one picture, drawn in the page in the look of the figures. */
"use strict";
handbook.chart = (() => {
  const SPACE = "http://www.w3.org/2000/svg";
  const [WIDTH, HEIGHT, LEFT, RIGHT, TOP, BOTTOM] = [480, 320, 76, 14, 10, 54];
  const { MINUS = "\u2212" } = handbook;

  function draw(name, settings = {}, ...children) {
    const made = document.createElementNS(SPACE, name);
    for (const [key, value] of Object.entries(settings)) made.setAttribute(key, value);
    made.append(...children);
    return made;
  }

  /* Round numbers between two ends: every decade, or four to eight steps of 1, 2 or 5. */
  function ticks(low, high, logarithmic) {
    if (logarithmic) {
      const decades = [];
      for (let power = Math.ceil(Math.log10(low) - 1e-9); power <= Math.log10(high) + 1e-9; power++) decades.push(10 ** power);
      const every = Math.ceil(decades.length / 7);
      return decades.filter((_, place) => place % every === 0);
    }
    const rough = (high - low) / 6, ten = 10 ** Math.floor(Math.log10(rough));
    const step = [1, 2, 5, 10].map((part) => part * ten).find((size) => size >= rough);
    const found = [];
    for (let at = Math.ceil(low / step); at * step <= high * (1 + 1e-12); at++) found.push(Number((at * step).toPrecision(12)));
    return found;
  }

  const label = (value) => {
    const power = Math.round(Math.log10(Math.abs(value)));
    if (value && (power < -3 || power > 4)) {
      const mantissa = value / 10 ** Math.floor(Math.log10(Math.abs(value)) + 1e-9);
      return (Math.abs(mantissa - 1) < 1e-9 ? "" : `${Number(mantissa.toPrecision(3))}·`) + `10${handbook.raised(Math.floor(Math.log10(Math.abs(value)) + 1e-9))}`;
    }
    return String(Number(value.toPrecision(6))).replace("-", MINUS);
  };

  /* Curves [{name, x, y, level}] with the names of the axes, a dot at each level; the picture says in words what it shows. */
  function chart({ id, title, names, curves, logarithmic }) {
    const usable = (value) => Number.isFinite(value) && (!logarithmic || value > 0);
    const points = curves.map(({ x, y }) => x.map((one, place) => [one, y[place]]).filter(([a, b]) => usable(a) && usable(b)));
    const every = [...points.flat(), ...curves.flatMap(({ level }) => (level ? [level] : []))];
    const ends = (axis) => [Math.min(...every.map((point) => point[axis])), Math.max(...every.map((point) => point[axis]))];
    const shape = logarithmic ? Math.log10 : Number;
    const [[x0, x1], [y0, y1]] = [ends(0), ends(1)];
    const place = (low, high, from, to) => (value) => from + ((shape(value) - shape(low)) / (shape(high) - shape(low) || 1)) * (to - from);
    const across = place(x0, x1, LEFT, WIDTH - RIGHT), up = place(y0, y1, HEIGHT - BOTTOM, TOP);
    const text = (words, settings) => draw("text", settings, words);
    const axes = [
      ...ticks(x0, x1, logarithmic).flatMap((value) => [
        draw("path", { class: "grid", d: `M${across(value).toFixed(1)} ${TOP}V${HEIGHT - BOTTOM}` }),
        text(label(value), { x: across(value).toFixed(1), y: HEIGHT - BOTTOM + 20, class: "middle" })]),
      ...ticks(y0, y1, logarithmic).flatMap((value) => [
        draw("path", { class: "grid", d: `M${LEFT} ${up(value).toFixed(1)}H${WIDTH - RIGHT}` }),
        text(label(value), { x: LEFT - 6, y: (up(value) + 5).toFixed(1), class: "end" })]),
      draw("path", { class: "axis", d: `M${LEFT} ${TOP}V${HEIGHT - BOTTOM}H${WIDTH - RIGHT}` }),
      text(names[0], { x: WIDTH - RIGHT, y: HEIGHT - 7, class: "end" }),
      text(names[1], { x: -TOP, y: 16, class: "end", transform: "rotate(-90)" }),
    ];
    const lines = points.map((curve, order) => draw("path", { class: `curve curve-${order + 1}`,
      d: curve.map(([a, b], step) => `${step ? "L" : "M"}${across(a).toFixed(1)} ${up(b).toFixed(1)}`).join("") }));
    const levels = curves.flatMap(({ level }, order) => (level ? [draw("circle", { class: `level curve-${order + 1}`, cx: across(level[0]).toFixed(1), cy: up(level[1]).toFixed(1), r: 4.5 })] : []));
    const said = `${names[1]} against ${names[0]}${logarithmic ? " on logarithmic axes" : ""}: ${curves.flatMap(({ name }, order) => {
      const last = points[order].at(-1);
      return !last ? [] : `${name} reaches ${label(Number(last[1].toPrecision(3)))} at ${label(Number(last[0].toPrecision(3)))}`;
    }).join("; ")}.`;
    return draw("svg", { class: "chart", viewBox: `0 0 ${WIDTH} ${HEIGHT}`, role: "img", "aria-labelledby": `${id}-title ${id}-said` },
      draw("title", { id: `${id}-title` }, title), draw("desc", { id: `${id}-said` }, said), ...axes, ...lines, ...levels);
  }

  /* A short piece of the line of a curve, for a legend. */
  const key = (order) => draw("svg", { class: "chart chart-key", viewBox: "0 0 36 10", "aria-hidden": "true" }, draw("path", { class: `curve curve-${order + 1}`, d: "M1 5H35" }));

  return { chart, key };
})();
