"use strict";
// One moving panel a history: the slider picks a frame; the pair is drawn to scale in it.
for (const panel of document.querySelectorAll(".panel")) {
  const data = JSON.parse(document.getElementById(panel.dataset.frames).textContent);
  const slider = panel.querySelector("input");
  const marker = document.getElementById(panel.dataset.marker);
  const svg = panel.querySelector("svg");
  const part = name => svg.querySelector("." + name);
  const largest = Math.max(...data.distance);
  const width = 700, height = 260, middle = height / 2;

  // the upper half of an outline, from left to right, mirrored below the axis
  function outline(half, place, sign, length) {
    if (!half.length) return "";
    const upper = [], lower = [];
    for (let i = 0; i < half.length; i += 2) {
      const x = (place + sign * half[i] / 1000 * length).toFixed(2), y = half[i + 1] / 1000 * length;
      upper.push(x + " " + (middle - y).toFixed(2));
      lower.unshift(x + " " + (middle + y).toFixed(2));
    }
    return "M" + upper.concat(lower).join("L") + "Z";
  }

  function circle(place, radius) {
    const r = Math.max(radius, 1.5);
    return `M${place - r} ${middle}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0Z`;
  }

  // lengths on one scale, unless the pair has shrunk below what can be seen: then a scale of its own
  function scaleFor(distance) {
    const whole = 0.42 * width / largest;
    return distance * whole >= 30 ? whole : 0.42 * width / distance;
  }

  function nice(length) {
    const power = 10 ** Math.floor(Math.log10(length));
    return [5, 2, 1].map(step => step * power).find(step => step <= length);
  }

  function show(n) {
    const distance = data.distance[n], scale = scaleFor(distance), length = distance * scale;
    const a = width / 2 - data.centre[n] * length, b = a + length;
    for (const [c, place, sign] of [["A", a, 1], ["B", b, -1]]) {
      part("lobe-" + c).setAttribute("d", outline(data[c].lobe[n], place, sign, length));
      const star = data[c].star[n];
      part("star-" + c).setAttribute("d", star.length
        ? outline(star, place, sign, length) : circle(place, data["radius_" + c][n] * length));
      part("name-" + c).setAttribute("x", place);
    }
    const bar = nice(0.2 * width / scale), text = Number(bar.toPrecision(2));
    part("bar").setAttribute("x2", 20 + bar * scale);
    part("bar-words").textContent = `${text >= 1e-3 ? text : text.toExponential(0)} Rsun`;
    for (const name of ["time", "period", "separation", "mass_A", "mass_B", "rate"])
      panel.querySelector("[data-of=" + name + "]").textContent = data[name][n];
    slider.setAttribute("aria-valuetext", `${data.time[n]}, period ${data.period[n]}`);
    const left = Number(marker.dataset.left), right = Number(marker.dataset.right);
    marker.style.left = (left + data.x[n] * (right - left)) + "%";
  }

  slider.max = data.x.length - 1;
  slider.addEventListener("input", () => show(Number(slider.value)));
  panel.hidden = marker.hidden = false;
  show(Number(slider.value));
}

// On paper nothing can be opened: print the config as well.
addEventListener("beforeprint", () => {
  for (const folded of document.querySelectorAll("details")) folded.open = true;
});
