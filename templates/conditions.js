/* At your conditions: the numbers of a sheet that depend on temperature, size and field follow what the reader sets.
   They come from the parameters that the page carries (SI) and from the universal functions of universal.js. */
"use strict";
(() => {
  // --- universal functions: a Chebyshev series inside its range, the limiting laws outside

  function series(table, variable) {
    const [low, high] = [Math.log(table.from), Math.log(table.to)];
    const x = (2 * Math.log(variable) - low - high) / (high - low);
    let [next, after] = [0, 0];
    for (let order = table.series.length - 1; order > 0; order -= 1) [next, after] = [2 * x * next - after + table.series[order], next];
    return x * next - after + table.series[0];
  }

  const inside = (table, variable) => variable >= table.from && variable <= table.to;

  /** C_V/3R of Debye's model at x = T/θ. */
  function debyeHeat(x) {
    const table = UNIVERSAL.debyeHeat;
    if (inside(table, x)) return Math.exp(series(table, x));
    return x < table.from ? ((4 * Math.PI ** 4) / 5) * x ** 3 : 1 - 1 / (20 * x ** 2) + 1 / (560 * x ** 4);
  }

  /** x⁵ ∫₀^{1/x} of the Bloch–Grüneisen law at x = T/θ. */
  function blochGrueneisen(x) {
    const table = UNIVERSAL.blochGrueneisen;
    if (inside(table, x)) return Math.exp(series(table, x));
    return x < table.from ? 124.43133061720467 * x ** 5 : (x / 4) * (1 - 1 / (18 * x ** 2) + 1 / (480 * x ** 4));
  }

  /** nλ³ over the degeneracy, by which the gas is nearly classical where it is small. */
  const crowding = (t) => 4 / (3 * Math.sqrt(Math.PI) * t ** 1.5);

  /** µ/E_F in three dimensions at t = T/T_F. */
  function chemicalPotential(t) {
    const table = UNIVERSAL.chemicalPotential;
    if (inside(table, t)) return series(table, t) * (1 + t);
    if (t < table.from) return 1 - (Math.PI ** 2 / 12) * t ** 2 - (Math.PI ** 4 / 80) * t ** 4;
    const y = crowding(t);
    return t * (Math.log(y) + y / Math.sqrt(8) - (3 / 16 - Math.sqrt(3) / 9) * y ** 2);
  }

  /** µ/E_F in two dimensions, t ln(e^{1/t} − 1). */
  const chemicalPotentialOfSheet = (t) => (t < 1 ? 1 + t * Math.log1p(-Math.exp(-1 / t)) : t * Math.log(Math.expm1(1 / t)));

  /** C_V/nk_B in three dimensions at t = T/T_F. */
  function electronHeat(t) {
    const table = UNIVERSAL.electronHeat;
    if (inside(table, t)) return Math.exp(series(table, t));
    if (t < table.from) return (Math.PI ** 2 / 2) * t * (1 - 0.3 * Math.PI ** 2 * t ** 2);
    const y = crowding(t);
    return 1.5 * (1 - 0.08838834764831845 * y + 0.0066 * y ** 2);
  }

  // --- films, after Fuchs and Sondheimer, Mayadas and Shatzkes

  /** 1 − (1−e⁻ᶻ)/z, from its series where the difference cancels. */
  function shortfall(z) {
    if (z >= 0.2) return 1 + Math.expm1(-z) / z;
    let total = 0;
    for (let order = 12; order > 1; order -= 1) total = ((1 - total) * z) / order;
    return total;
  }

  /** What surfaces leave of the mean free path, z path lengths apart. */
  function freedom(z, specularity) {
    const scattered = -Math.expm1(-z);
    const diffuse = 1 - specularity;
    return (diffuse * shortfall(z) + specularity * scattered) / (diffuse + specularity * scattered);
  }

  /** ρ/ρ₀ of a film κ mean free paths thick, with surfaces of specularity p and no grains. */
  function surfaceFactor(kappa, specularity) {
    const { inverseCosine, weight } = UNIVERSAL.surface;
    const free = inverseCosine.map((stretch, i) => freedom(Math.min(kappa * stretch, 1e100), specularity) * weight[i]);
    return 1 / free.reduce((sum, part) => sum + part, 0);
  }

  /** ρ/ρ₀ of a film κ mean free paths thick, with grains of strength α and surfaces of specularity p. */
  function filmFactor(kappa, alpha, specularity) {
    const { cosine, inverseSine, outer, inverseAzimuth, inner } = UNIVERSAL.film;
    let conductance = 0;
    cosine.forEach((w, i) => {
      const slowing = 1 + alpha / w;
      let free = 0;
      inverseAzimuth.forEach((stretch, j) => {
        free += freedom(Math.min(kappa * slowing * inverseSine[i] * stretch, 1e100), specularity) * inner[j];
      });
      conductance += (free * outer[i] * w ** 2) / slowing;
    });
    return Math.PI / 6 / conductance;
  }

  // --- levels of a cube

  const LARGEST_COUNT = 1500;

  /** Points n_i ≥ 1 within a radius; the leading terms of Weyl's law take over where they are as good as the count. */
  function hardWallDeficit(product, degeneracyFree) {
    const radius = product / Math.PI;
    if (radius > LARGEST_COUNT) return ((9 * Math.PI) / (4 * product)) * (1 - 2 / product);
    const square = radius ** 2;
    let points = 0;
    for (let i = 1; i * i <= square - 2; i += 1) {
      for (let j = 1; i * i + j * j <= square - 1; j += 1) points += Math.floor(Math.sqrt(square - i * i - j * j));
    }
    return 1 - points / degeneracyFree;
  }

  // --- one material at one set of conditions, everything in SI; a number that cannot be told is NaN

  function resistivity(material, temperature) {
    const { reference, reference_temperature: known, residual, transport_debye: debye, dimension } = material;
    if (reference === undefined) return NaN;
    if (debye === undefined || dimension === 2) return Math.abs(temperature - known) <= 1e-6 * known ? reference : NaN;
    const growth = blochGrueneisen(temperature / debye) / blochGrueneisen(known / debye);
    return residual + (reference - residual) * growth;
  }

  function transport(m, T, field) {
    const rho = resistivity(m, T);
    const time = m.time_resistivity / rho;
    const path = m.fermi_velocity * time;
    return {
      resistivity_from_debye: rho,
      conductivity: 1 / rho,
      relaxation_time: time,
      mean_free_path: path,
      path_wavevector_product: m.fermi_wavevector * path,
      mobility: m.charge_over_mass * time,
      diffusion_coefficient: (m.fermi_velocity ** 2 * time) / m.dimension,
      electron_thermal_conductivity: (m.lorenz * T) / rho,
      skin_depth: Math.sqrt(rho / (Math.PI * m.magnetic_constant * 1e9)),
      cyclotron_angle: m.charge_over_mass * time * field,
    };
  }

  function heat(m, T) {
    const t = T / m.fermi_temperature;
    const potential = m.dimension === 2 ? chemicalPotentialOfSheet(t) : chemicalPotential(t);
    return {
      thermopower: ((m.sign * Math.PI ** 2) / m.dimension_share) * (m.boltzmann / m.charge) * t,
      chemical_potential: m.fermi_energy * potential,
      electron_heat_capacity: ((2 * m.heat_coefficient * m.fermi_temperature) / Math.PI ** 2) * electronHeat(t),
      lattice_heat_capacity: 3 * m.atoms * m.gas_constant * debyeHeat(T / m.debye),
      thermal_edge: Math.cbrt((4 * m.fermi_energy) / (3 * m.density * m.boltzmann * T)),
    };
  }

  function finite(m, set, rho, path) {
    const alpha = ((path / set.grainSize) * set.grainReflection) / (1 - set.grainReflection);
    const kappa = set.size / path;
    const product = m.fermi_wavevector * set.size;
    return {
      level_spacing: 2 / (set.size ** 3 * m.density_of_states),
      hard_wall_deficit: hardWallDeficit(product, product ** 3 / (6 * Math.PI ** 2)),
      film_resistivity_surface: rho * surfaceFactor(kappa, set.specularity),
      film_resistivity_grain: rho * filmFactor(kappa, alpha, 1),
      film_resistivity: rho * filmFactor(kappa, alpha, set.specularity),
    };
  }

  function numbersAt(material, set) {
    const m = { ...material, dimension_share: material.dimension === 2 ? 3 : 2 };
    const found = { ...transport(m, set.temperature, set.field), ...heat(m, set.temperature) };
    if (m.dimension === 3) Object.assign(found, finite(m, set, found.resistivity_from_debye, found.mean_free_path));
    return found;
  }

  function indicatorsAt(m, set, found) {
    return {
      "T/T_F": set.temperature / m.fermi_temperature,
      "T/θ": set.temperature / m.transport_debye,
      "T/T_c": set.temperature / m.critical,
      "k_F·l": found.path_wavevector_product,
      "δ/l": found.skin_depth / found.mean_free_path,
      "d/λ_F": (set.size * m.fermi_wavevector) / (2 * Math.PI),
      "d/l": set.size / found.mean_free_path,
      "level spacing/k_BT": found.level_spacing / (m.boltzmann * set.temperature),
    };
  }

  function grade(value, { strained, broken, below, until }) {
    const passed = (bound) => bound !== null && (below ? value < bound : value > bound);
    if (passed(broken)) return "broken";
    return passed(strained) && (until === null || value <= until) ? "strained" : "holds";
  }

  // --- the page

  const form = document.getElementById("conditions");
  if (!form || typeof UNIVERSAL === "undefined" || typeof SHEET === "undefined") return;
  const { parameters, rows, bounds, still, titles } = SHEET.conditions;
  const field = (id) => document.getElementById(`set-${id}`);
  const sliders = [...form.querySelectorAll("input[type=range]")];
  const start = new Map([...form.querySelectorAll("input[type=number]")].map((input) => [input.id, input.value]));
  const WORST = ["holds", "strained", "broken"];
  const NANO = 1e-9;

  const SCALES = {
    linear: [(part, low, high) => low + part * (high - low), (value, low, high) => (value - low) / (high - low)],
    square: [(part, low, high) => low + part ** 2 * (high - low), (value, low, high) => Math.sqrt((value - low) / (high - low))],
    log: [(part, low, high) => low * (high / low) ** part, (value, low, high) => Math.log(value / low) / Math.log(high / low)],
  };

  const rangeOf = (input) => [Number(input.min), Number(input.max)];
  const isIn = (input) => input.value !== "" && input.valueAsNumber >= Number(input.min) && input.valueAsNumber <= Number(input.max);

  /** The conditions as set, in SI; null where a field holds nothing usable. */
  function conditions() {
    const inputs = [...start.keys()].map((id) => document.getElementById(id));
    inputs.forEach((input) => input.toggleAttribute("aria-invalid", !isIn(input)));
    inputs.filter((input) => !isIn(input)).forEach((input) => input.setAttribute("aria-invalid", "true"));
    if (!inputs.every(isIn)) return null;
    const value = (id, otherwise) => (field(id) ? field(id).valueAsNumber : otherwise);
    return {
      temperature: value("temperature"),
      field: value("field", 0),
      size: value("size", NaN) * NANO,
      specularity: value("specularity", 0),
      grainSize: value("grain-size", NaN) * NANO,
      grainReflection: value("grain-reflection", 0),
    };
  }

  /** Four significant digits, as the tables of the handbook set them. */
  function shown(value) {
    if (!Number.isFinite(value)) return "–";
    if (value === 0) return "0";
    const rounded = value.toPrecision(4);
    const power = Math.floor(Math.log10(Math.abs(Number(rounded))));
    const plain = power >= -3 && power <= 4;
    const [digits, exponent] = plain ? [String(Number(rounded).toFixed(Math.max(0, 3 - power))), 0] : Number(rounded).toExponential(3).split("e");
    const minus = (text) => String(text).replace("-", "\u2212").replace("+", "");
    return minus(digits) + (plain ? "" : `\u202f×\u202f10<sup>${minus(exponent)}</sup>`);
  }

  function put(cell, html) {
    if (cell.dataset.shown === html) return;
    cell.dataset.shown = html;
    const [digits, power] = html.split("<sup>");
    cell.replaceChildren(digits);
    if (power) cell.append(Object.assign(document.createElement("sup"), { textContent: power.replace("</sup>", "") }));
  }

  function mark(cell, kind, word, why = "") {
    const span = Object.assign(document.createElement("span"), { className: `${kind} ${word}`, textContent: word });
    cell.replaceChildren(span, why ? ` ${why}` : "");
  }

  function showIndicators(values) {
    const graded = { ...still };
    for (const row of document.querySelectorAll("tr[data-indicator]")) {
      const name = row.dataset.indicator;
      const [id, limits] = bounds[name];
      const value = values[name];
      const word = Number.isFinite(value) ? grade(value, limits) : "";
      put(row.cells[2], shown(value));
      row.cells[5].replaceChildren();
      if (word) mark(row.cells[5], "condition", word);
      // That transport differs in a specimen of this size says nothing about the levels in a film, whose bound is d/λ_F.
      if (word && name !== "d/l" && WORST.indexOf(word) > WORST.indexOf(graded[id] || "holds")) graded[id] = word;
    }
    return graded;
  }

  function showNumbers(found, graded) {
    const outside = [];
    for (const row of document.querySelectorAll("tr[data-follow]")) {
      const [factor, assumed] = rows[row.dataset.follow];
      const value = found[row.dataset.follow] / factor;
      const [number, told] = [row.cells[2], row.cells[4]];
      put(number, shown(value));
      number.dataset.value = Number.isFinite(value) ? String(value) : "";
      told.replaceChildren();
      if (!Number.isFinite(value)) continue;
      const worst = Math.max(0, ...assumed.map((id) => WORST.indexOf(graded[id] || "holds")));
      const because = assumed.filter((id) => worst && WORST.indexOf(graded[id] || "holds") === worst);
      const why = because.map((id) => titles[id]).join(", ");
      if (worst === 2) mark(told, "standing", "outside", why);
      else mark(told, "condition", WORST[worst], why);
      if (worst === 2) outside.push(row.cells[1].textContent);
    }
    return outside;
  }

  let said = "";
  let waiting = 0;

  /** Tell a listener what changed, once the reader pauses. */
  function say(text) {
    if (text === said) return;
    said = text;
    clearTimeout(waiting);
    waiting = setTimeout(() => {
      document.getElementById("conditions-said").textContent = text;
    }, 600);
  }

  function follow() {
    const set = conditions();
    if (!set) return say("A setting is empty or out of its range; the numbers stay as they were.");
    const found = numbersAt(parameters, set);
    const graded = showIndicators(indicatorsAt(parameters, set, found));
    const outside = showNumbers(found, graded);
    const many = outside.length;
    return say(many ? `${many} ${many === 1 ? "number lies" : "numbers lie"} outside the model at these conditions.` : "No number lies outside the model at these conditions.");
  }

  function placeSlider(slider) {
    const input = document.getElementById(slider.dataset.for);
    if (isIn(input)) slider.value = SCALES[slider.dataset.scale][1](input.valueAsNumber, ...rangeOf(input));
    slider.setAttribute("aria-valuetext", input.value);
  }

  function restore(values) {
    for (const [id, value] of start) document.getElementById(id).value = values[id.replace("set-", "")] ?? value;
    sliders.forEach(placeSlider);
    follow();
  }

  form.addEventListener("input", (event) => {
    const slider = sliders.find((one) => one === event.target || one.dataset.for === event.target.id);
    if (slider === event.target) {
      const input = document.getElementById(slider.dataset.for);
      input.value = Number(SCALES[slider.dataset.scale][0](slider.valueAsNumber, ...rangeOf(input)).toPrecision(3));
      slider.setAttribute("aria-valuetext", input.value);
    } else if (slider) placeSlider(slider);
    follow();
  });
  form.addEventListener("click", (event) => {
    const button = event.target.closest("button[data-settings]");
    if (button) restore(JSON.parse(button.dataset.settings || "{}"));
  });
  form.hidden = false;
  document.getElementById("conditions-need").hidden = true;
  document.querySelectorAll("[data-follows]").forEach((part) => { part.hidden = false; });
  sliders.forEach(placeSlider);
  follow();
})();
