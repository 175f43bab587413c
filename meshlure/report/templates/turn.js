(function () {
"use strict";
// Draws the bait to be turned: plain WebGL 1, parallel projection, nothing fetched. Where it cannot, the page stays as
// it is without a script. Coordinates are mm: x to the right, y away from the eye, z up from the level water.
var figure = document.getElementById("turn"), holder = document.getElementById("turn-data");
if (!figure || !holder) return;
var canvas = figure.querySelector("canvas.scene"), sheet = figure.querySelector("canvas.marks");
var gl = canvas.getContext("webgl", {alpha: false, antialias: true, stencil: true});
var pen = sheet.getContext("2d");
if (!gl || !pen) return;
var data = JSON.parse(holder.textContent);

// Meshes ------------------------------------------------------------------------------------------------------------
function bytes(text) {
  var raw = atob(text), out = new Uint8Array(raw.length);
  for (var i = 0; i < raw.length; i++) out[i] = raw.charCodeAt(i);
  return out.buffer;
}
// Places and normals of a piece's corners, in the order of its faces.
function corners(piece) {
  var steps = new Uint16Array(bytes(piece.places)), facing = new Int8Array(bytes(piece.normals));
  var faces = piece.wide ? new Uint32Array(bytes(piece.faces)) : new Uint16Array(bytes(piece.faces));
  var out = new Float32Array(6 * faces.length);
  for (var i = 0; i < faces.length; i++) {
    for (var k = 0; k < 3; k++) {
      out[6 * i + k] = data.low[k] + data.step * steps[3 * faces[i] + k];
      out[6 * i + 3 + k] = facing[3 * faces[i] + k] / 127;
      low[k] = Math.min(low[k], out[6 * i + k]);
      high[k] = Math.max(high[k], out[6 * i + k]);
    }
  }
  return out;
}
function colour(text) {
  var n = parseInt(text.slice(1), 16);
  return [(n >> 16 & 255) / 255, (n >> 8 & 255) / 255, (n & 255) / 255];
}
var low = [Infinity, Infinity, Infinity], high = [-Infinity, -Infinity, -Infinity];
var pieces = data.pieces.map(function (piece) {
  return {corners: corners(piece), look: piece.look, colour: colour(piece.colour), label: piece.label, at: piece.at,
    shown: true};
});
var middle = [0, 1, 2].map(function (i) { return (low[i] + high[i]) / 2; });
var reach = Math.hypot(high[0] - low[0], high[1] - low[1], high[2] - low[2]) || 1;
var wet = data.water !== null, waterShown = wet, marksShown = true;
// The water shows as a level sheet round the bait, cut at whole centimetres.
var edge = [low[0] - 10, low[1] - 22, high[0] + 10, high[1] + 22];

// Programs ----------------------------------------------------------------------------------------------------------
var HEAD = "precision highp float;\nvarying vec3 place, normal;\n";
var VERTEX = HEAD + "attribute vec3 at, facing;\nuniform vec3 right, up, away, middle;\nuniform vec4 frame;\n" +
  "void main() {\n  place = at; normal = facing; vec3 p = at - middle;\n" +
  "  gl_Position = vec4(dot(p, right) * frame.x + frame.z, dot(p, up) * frame.y + frame.w, dot(p, away) / " +
  reach.toFixed(3) + " / 2.0, 1.0);\n}";
var SOLID = HEAD + "uniform vec3 ink, up, away, right;\nvoid main() {\n" +
  "  vec3 n = normalize(normal); if (dot(n, away) > 0.0) n = -n;\n" +
  "  float light = 0.62 + 0.38 * max(dot(n, normalize(up * 0.8 - away - right * 0.5)), 0.0);\n" +
  "  float rim = smoothstep(0.35, 0.0, -dot(n, away));\n" +
  "  gl_FragColor = vec4(ink * light * (1.0 - 0.45 * rim), 1.0);\n}";
var GLASS = HEAD + "uniform vec3 ink, line, deep, away;\nuniform float level, side, thin, strength;\nvoid main() {\n" +
  "  float h = place.z - level; if (side != 0.0 && h * side < 0.0) discard;\n" +
  "  vec3 n = normalize(normal); float rim = pow(1.0 - abs(dot(n, away)), 2.2);\n" +
  "  vec3 base = side != 0.0 && h < 0.0 ? mix(ink, deep, 0.35) : ink;\n" +
  "  float a = (0.13 + 0.62 * rim) * strength; vec3 c = mix(base, line, 0.75 * rim);\n" +
  "  if (side != 0.0 && gl_FrontFacing) {\n" +
  "    float on = 1.0 - smoothstep(0.6, 1.4, abs(h) / max(sqrt(1.0 - n.z * n.z), 0.15) / thin);\n" +
  "    c = mix(c, deep, on); a = max(a, on * 0.9);\n  }\n  gl_FragColor = vec4(c * a, a);\n}";
var WATER = HEAD + "uniform vec3 deep;\nuniform vec4 edge;\nuniform vec2 fine;\nvoid main() {\n" +
  "  vec2 d = abs(fract(place.xy / 10.0 + 0.5) - 0.5) * 10.0 / fine, room = clamp(10.0 / fine / 6.0 - 0.5, 0.0, 1.0);\n" +
  "  vec2 rule = (1.0 - smoothstep(0.3, 1.1, d)) * room;\n" +
  "  vec2 b = min(place.xy - edge.xy, edge.zw - place.xy) / fine;\n" +
  "  float a = max(0.16 + 0.13 * max(rule.x, rule.y), 0.6 * (1.0 - smoothstep(1.2, 2.2, min(b.x, b.y))));\n" +
  "  gl_FragColor = vec4(deep * a, a);\n}";
function program(fragment) {
  var made = gl.createProgram();
  [[gl.VERTEX_SHADER, VERTEX], [gl.FRAGMENT_SHADER, fragment]].forEach(function (part) {
    var shader = gl.createShader(part[0]);
    gl.shaderSource(shader, part[1]);
    gl.compileShader(shader);
    gl.attachShader(made, shader);
  });
  gl.bindAttribLocation(made, 0, "at");
  gl.bindAttribLocation(made, 1, "facing");
  gl.linkProgram(made);
  return gl.getProgramParameter(made, gl.LINK_STATUS) ? {made: made, places: {}} : null;
}
var solid = program(SOLID), glass = program(GLASS), water = program(WATER);
if (!solid || !glass || !water) return;
function buffer(values) {
  var made = gl.createBuffer();
  gl.bindBuffer(gl.ARRAY_BUFFER, made);
  gl.bufferData(gl.ARRAY_BUFFER, values, gl.STATIC_DRAW);
  return made;
}
pieces.forEach(function (piece) {
  piece.buffer = buffer(piece.corners);
  piece.count = piece.corners.length / 6;
  piece.corners = null;
});
var sheetCorners = [];
[[0, 1], [2, 1], [2, 3], [0, 1], [2, 3], [0, 3]].forEach(function (c) {
  sheetCorners.push(edge[c[0]], edge[c[1]], data.water, 0, 0, 1);
});
var sheetBuffer = buffer(new Float32Array(sheetCorners));
gl.enableVertexAttribArray(0);
gl.enableVertexAttribArray(1);

// Eye ---------------------------------------------------------------------------------------------------------------
var START = {turn: -0.5, tilt: 0.24}, eye = {turn: START.turn, tilt: START.tilt, fills: true}, wide = 1, tall = 1, pending = false;
function axes(turn, tilt) {
  var c = Math.cos(turn), s = Math.sin(turn), k = Math.cos(tilt), m = Math.sin(tilt);
  return {right: [c, s, 0], up: [-s * m, c * m, k], away: [-s * k, c * k, -m]};
}
function dot(a, b) { return a[0] * b[0] + a[1] * b[1] + a[2] * b[2]; }
// Pixels a millimetre at which the bait fills the picture in a direction.
function fitting(turn, tilt) {
  var way = axes(turn, tilt), x = 0, y = 0;
  for (var i = 0; i < 8; i++) {
    var p = [0, 1, 2].map(function (k) { return (i >> k & 1 ? high[k] : low[k]) - middle[k]; });
    x = Math.max(x, Math.abs(dot(p, way.right)));
    y = Math.max(y, Math.abs(dot(p, way.up)));
  }
  return Math.min((wide - 56) / (2 * x || 1), (tall - 76) / (2 * y || 1));
}
function filling(turn, tilt) {
  return {turn: turn, tilt: tilt, scale: fitting(turn, tilt), x: 0, y: 0, fills: true};
}
function look(turn, tilt) {
  var to = filling(turn, tilt);
  if (window.matchMedia("(prefers-reduced-motion: reduce)").matches) { eye = to; draw(); return; }
  var from = eye, begun = performance.now(), full = 2 * Math.PI;
  to.turn = from.turn + ((turn - from.turn) % full + 1.5 * full) % full - full / 2;
  eye = to;
  (function step(now) {
    if (eye !== to && eye.from !== to) return;
    var t = Math.min(Math.max((now - begun) / 280, 0), 1), e = t * t * (3 - 2 * t);
    if (t >= 1) { eye = to; draw(); return; }
    eye = {from: to};
    ["turn", "tilt", "scale", "x", "y"].forEach(function (key) { eye[key] = from[key] + (to[key] - from[key]) * e; });
    draw();
    requestAnimationFrame(step);
  })(begun);
}
function moved(turn, tilt) {
  eye = {turn: eye.turn + turn, tilt: Math.max(-Math.PI / 2, Math.min(Math.PI / 2, eye.tilt + tilt)),
    scale: eye.scale, x: eye.x, y: eye.y};
  draw();
}
function shifted(x, y) {
  eye = {turn: eye.turn, tilt: eye.tilt, scale: eye.scale, x: eye.x + x, y: eye.y + y};
  draw();
}
function zoomed(by) {
  var fit = fitting(START.turn, START.tilt), scale = Math.max(fit / 3, Math.min(fit * 40, eye.scale * by));
  by = scale / eye.scale;
  eye = {turn: eye.turn, tilt: eye.tilt, scale: scale, x: eye.x * by, y: eye.y * by};
  draw();
}

// Drawing -----------------------------------------------------------------------------------------------------------
function draw() {
  if (!pending) { pending = true; requestAnimationFrame(function () { pending = false; paint(); }); }
}
function use(what, way, values) {
  gl.useProgram(what.made);
  values.right = way.right; values.up = way.up; values.away = way.away; values.middle = middle;
  values.frame = [2 * eye.scale / wide, 2 * eye.scale / tall, 2 * eye.x / wide, -2 * eye.y / tall];
  Object.keys(values).forEach(function (name) {
    if (!(name in what.places)) what.places[name] = gl.getUniformLocation(what.made, name);
    var value = values[name], at = what.places[name];
    if (typeof value === "number") gl.uniform1f(at, value); else gl["uniform" + value.length + "fv"](at, value);
  });
}
function show(made, count) {
  gl.bindBuffer(gl.ARRAY_BUFFER, made);
  gl.vertexAttribPointer(0, 3, gl.FLOAT, false, 24, 0);
  gl.vertexAttribPointer(1, 3, gl.FLOAT, false, 24, 12);
  gl.drawArrays(gl.TRIANGLES, 0, count);
}
function paint() {
  var way = axes(eye.turn, eye.tilt), thin = 1 / eye.scale, surface = waterShown;
  var body = pieces[0], inkOf = colour(data.colours.ink), deep = colour(data.colours.water);
  gl.viewport(0, 0, canvas.width, canvas.height);
  gl.clearColor.apply(gl, data.under ? [0.925, 0.96, 0.98, 1] : [1, 1, 1, 1]);
  gl.clear(gl.COLOR_BUFFER_BIT | gl.DEPTH_BUFFER_BIT | gl.STENCIL_BUFFER_BIT);
  gl.enable(gl.DEPTH_TEST);
  gl.disable(gl.BLEND);
  if (surface && body.shown) {
    // Count how often the body's skin lies before the water: where not evenly, the water is inside the body.
    gl.colorMask(false, false, false, false);
    use(water, way, {edge: edge});
    show(sheetBuffer, 6);
    gl.depthMask(false);
    gl.enable(gl.STENCIL_TEST);
    gl.stencilFunc(gl.ALWAYS, 0, 255);
    gl.stencilOpSeparate(gl.FRONT, gl.KEEP, gl.KEEP, gl.INCR_WRAP);
    gl.stencilOpSeparate(gl.BACK, gl.KEEP, gl.KEEP, gl.DECR_WRAP);
    use(solid, way, {});
    show(body.buffer, body.count);
    gl.disable(gl.STENCIL_TEST);
    gl.depthMask(true);
    gl.colorMask(true, true, true, true);
    gl.clear(gl.DEPTH_BUFFER_BIT);
  }
  pieces.forEach(function (piece) {
    if (!piece.shown || piece.look !== "solid") return;
    use(solid, way, {ink: piece.colour});
    show(piece.buffer, piece.count);
  });
  gl.depthMask(false);
  gl.enable(gl.BLEND);
  gl.blendFunc(gl.ONE, gl.ONE_MINUS_SRC_ALPHA);
  // What lies beyond the water first, then the water, then what lies on the eye's side of it.
  var far = way.away[2] <= 0 ? -1 : 1;
  [far, -far].forEach(function (side, number) {
    if (number === 1 && surface) sheetOf(way, thin, deep);
    if (number === 1 && !surface) return;
    pieces.concat(body).forEach(function (piece, place) {
      // The body comes last: it lies round everything.
      if (!piece.shown || piece.look === "solid" || piece === body && place === 0) return;
      use(glass, way, {ink: piece.colour, line: inkOf, deep: deep, level: surface ? data.water : 0,
        side: surface ? side : 0, thin: thin, strength: piece === body ? 1 : 0.8});
      gl.enable(gl.CULL_FACE);
      [gl.FRONT, gl.BACK].forEach(function (culled) { gl.cullFace(culled); show(piece.buffer, piece.count); });
      gl.disable(gl.CULL_FACE);
    });
  });
  gl.depthMask(true);
  marks(way);
}
function sheetOf(way, thin, deep) {
  gl.enable(gl.STENCIL_TEST);
  gl.stencilFunc(gl.EQUAL, 0, 255);
  gl.stencilOp(gl.KEEP, gl.KEEP, gl.KEEP);
  // mm across the rules to a pixel on the screen: more the flatter the water is looked at.
  var c = way.right[0], s = way.right[1], m = Math.max(Math.abs(way.away[2]), 0.01);
  use(water, way, {deep: deep, edge: edge, fine: [thin * Math.hypot(c, s / m), thin * Math.hypot(s, c / m)]});
  show(sheetBuffer, 6);
  gl.disable(gl.STENCIL_TEST);
}
function marks(way) {
  var dots = sheet.width / wide, taken = [], font = getComputedStyle(figure).fontFamily;
  pen.setTransform(dots, 0, 0, dots, 0, 0);
  pen.clearRect(0, 0, wide, tall);
  pen.lineJoin = "round";
  pen.textAlign = "center";
  pen.textBaseline = "middle";
  function spot(at) {
    var p = [at[0] - middle[0], at[1] - middle[1], at[2] - middle[2]];
    return [wide / 2 + eye.x + dot(p, way.right) * eye.scale, tall / 2 + eye.y - dot(p, way.up) * eye.scale];
  }
  function stroke(shape) {
    [["#ffffff", 4], [data.colours.ink, 1.6]].forEach(function (ink) {
      pen.strokeStyle = ink[0]; pen.lineWidth = ink[1]; pen.beginPath(); shape(); pen.stroke();
    });
  }
  function write(text, x, y, style) {
    pen.font = style + " " + font;
    pen.strokeStyle = "#ffffff"; pen.lineWidth = 3.5; pen.strokeText(text, x, y);
    pen.fillStyle = data.colours.ink; pen.fillText(text, x, y);
  }
  // Free room for a word near a place, at the first of some seats where it covers no other.
  function seat(text, at, half, seats) {
    for (var i = 0; i < seats.length; i++) {
      var x = at[0] + seats[i][0], y = at[1] + seats[i][1];
      // What is in the picture has its word in the picture.
      if (at[0] > 0 && at[0] < wide) x = Math.min(Math.max(x, half + 4), wide - half - 4);
      var free = taken.every(function (t) { return Math.abs(t[0] - x) > t[2] + half || Math.abs(t[1] - y) > t[3] + 7; });
      if (free || i === seats.length - 1 && text.length === 1 && text > "9") return [x, y];
    }
    return null;
  }
  if (marksShown) {
    var rings = data.marks.filter(function (mark) { return mark.look === "ring"; });
    rings.forEach(function (mark, number) {
      var at = spot(mark.at), r = number ? 4.5 : 6.5;
      stroke(function () { pen.arc(at[0], at[1], r, 0, 2 * Math.PI); });
      taken.push([at[0], at[1], r, r]);
    });
    data.marks.forEach(function (mark) {
      var at = spot(mark.at), x = at[0], y = at[1];
      if (mark.look === "cross") stroke(function () {
        pen.moveTo(x - 5, y); pen.lineTo(x + 5, y); pen.moveTo(x, y - 5); pen.lineTo(x, y + 5);
      });
      if (mark.look === "diamond") stroke(function () {
        pen.moveTo(x - 5, y); pen.lineTo(x, y - 5); pen.lineTo(x + 5, y); pen.lineTo(x, y + 5); pen.closePath();
      });
      if (mark.look !== "word" && mark.look !== "ring") taken.push([x, y, 5, 5]);
    });
    rings.forEach(function (mark, number) {
      var s = number ? 1 : -1;
      var at = seat(mark.name, spot(mark.at), 7, [[15 * s, -13], [17 * s, 0], [15 * s, 13], [-15 * s, -13], [0, -20 * s]]);
      write(mark.name, at[0], at[1], "bold 15px");
      taken.push([at[0], at[1], 7, 7]);
    });
    data.marks.forEach(function (mark) {
      if (mark.look !== "word") return;
      var at = spot(mark.at), out = at[0] < wide / 2 + eye.x ? -1 : 1;
      at = seat(mark.name, at, 17, [[26 * out, -16], [26 * out, 16], [0, -26], [0, 26]]);
      if (at) { write(mark.name, at[0], at[1], "italic 13px"); taken.push([at[0], at[1], 17, 7]); }
    });
    pieces.forEach(function (piece) {
      if (!piece.shown || !piece.label) return;
      var half = 4.5 * piece.label.length;
      var at = seat(piece.label, spot(piece.at), half, [[0, 0], [0, -14], [0, 14], [14, 0], [-14, 0]]);
      if (at) { write(piece.label, at[0], at[1], "600 13px"); taken.push([at[0], at[1], half, 7]); }
    });
  }
  var long = [1, 2, 5, 10, 20, 50, 100, 200, 500].filter(function (mm) { return mm * eye.scale <= wide / 3; }).pop() || 1;
  stroke(function () {
    pen.moveTo(14, tall - 12); pen.lineTo(14 + long * eye.scale, tall - 12);
    pen.moveTo(14, tall - 16); pen.lineTo(14, tall - 8);
    pen.moveTo(14 + long * eye.scale, tall - 16); pen.lineTo(14 + long * eye.scale, tall - 8);
  });
  pen.textAlign = "left";
  write(long + " mm", 14, tall - 26, "13px");
}

// Hands -------------------------------------------------------------------------------------------------------------
var fingers = {};
function grip() {
  var held = Object.keys(fingers).map(function (key) { return fingers[key]; });
  if (held.length < 2) return held[0] && {x: held[0].x, y: held[0].y, apart: 0};
  return {x: (held[0].x + held[1].x) / 2, y: (held[0].y + held[1].y) / 2,
    apart: Math.hypot(held[0].x - held[1].x, held[0].y - held[1].y)};
}
sheet.addEventListener("pointerdown", function (event) {
  if (event.button !== 0) return;
  fingers[event.pointerId] = {x: event.clientX, y: event.clientY};
  sheet.setPointerCapture(event.pointerId);
});
sheet.addEventListener("pointermove", function (event) {
  if (!(event.pointerId in fingers)) return;
  var before = grip();
  fingers[event.pointerId] = {x: event.clientX, y: event.clientY};
  var after = grip(), x = after.x - before.x, y = after.y - before.y;
  if (before.apart && after.apart) { zoomed(after.apart / before.apart); shifted(x, y); }
  else if (event.shiftKey) shifted(x, y);
  else moved(-x * 0.009, y * 0.009);
});
["pointerup", "pointercancel", "lostpointercapture"].forEach(function (name) {
  sheet.addEventListener(name, function (event) { delete fingers[event.pointerId]; });
});
sheet.addEventListener("wheel", function (event) {
  // The wheel scrolls the page until the picture has been clicked or reached by key.
  if (document.activeElement !== sheet && !event.ctrlKey) return;
  event.preventDefault();
  zoomed(Math.exp(-event.deltaY * (event.deltaMode ? 0.05 : 0.0016)));
}, {passive: false});
var KEYS = {ArrowLeft: [1, 0], ArrowRight: [-1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1]};
sheet.addEventListener("keydown", function (event) {
  var way = KEYS[event.key], step = Math.PI / 18;
  if (event.ctrlKey || event.altKey || event.metaKey) return;
  if (way && event.shiftKey) shifted(-12 * way[0], 12 * way[1]);
  else if (way) moved(step * way[0], step * way[1]);
  else if (event.key === "+" || event.key === "=") zoomed(1.2);
  else if (event.key === "-") zoomed(1 / 1.2);
  else if (event.key === "0" || event.key === "Home") look(START.turn, START.tilt);
  else return;
  event.preventDefault();
});
var BUTTONS = {
  reset: function () { look(START.turn, START.tilt); }, side: function () { look(0, 0); },
  above: function () { look(0, Math.PI / 2); }, front: function () { look(-Math.PI / 2, 0); },
  nearer: function () { zoomed(1.25); }, farther: function () { zoomed(1 / 1.25); }
};
figure.addEventListener("click", function (event) {
  var button = event.target.closest("button[data-do]");
  if (button) BUTTONS[button.getAttribute("data-do")]();
});
figure.addEventListener("change", function (event) {
  var what = event.target.getAttribute("data-show"), on = event.target.checked;
  if (what === "water") waterShown = on && wet;
  else if (what === "marks") marksShown = on;
  else if (what !== null) pieces[+what].shown = on;
  draw();
});
canvas.addEventListener("webglcontextlost", function () { figure.hidden = true; });

function fitted() {
  var box = sheet.getBoundingClientRect(), dots = Math.min(window.devicePixelRatio || 1, 2);
  if (box.width < 2 || box.height < 2) return;
  var before = Math.min(wide, tall * 2);
  wide = box.width; tall = box.height;
  [canvas, sheet].forEach(function (each) {
    each.width = Math.round(wide * dots); each.height = Math.round(tall * dots);
  });
  // A view that nobody has moved fills the picture anew.
  if (eye.fills) eye = filling(eye.turn, eye.tilt);
  else zoomed(Math.min(wide, tall * 2) / before);
  paint();
}
// On paper nothing turns: what was last looked at stands there as a picture.
var turned = document.getElementById("turned");
window.addEventListener("beforeprint", function () {
  if (figure.hidden || !wide) return;
  paint();
  var kept = turned.querySelector("canvas"), ink = kept.getContext("2d");
  kept.width = canvas.width; kept.height = canvas.height;
  ink.drawImage(canvas, 0, 0);
  ink.drawImage(sheet, 0, 0);
  turned.hidden = false;
});
window.addEventListener("afterprint", function () { turned.hidden = true; });
figure.hidden = false;
document.querySelectorAll("[data-with=turn]").forEach(function (each) { each.hidden = false; });
fitted();
new ResizeObserver(fitted).observe(sheet);
})();
