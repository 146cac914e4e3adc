// A rose window of arcs around a star, with a border of rounded corners: makerjs 0.19.2, node 20.
// Writes makerjs.svg and makerjs.dxf, and prints for each layer how many paths it has and how long they are by makerjs itself.
const m = require("makerjs");
const fs = require("fs");
const petals = {};
for (let i = 0; i < 6; i++) {
  petals["petal" + i] = m.model.rotate(
    { models: { arc: new m.models.Oval(60, 140) } }, i * 60, [0, 0]);
  m.model.move(petals["petal" + i], [0, 0]);
}
const rose = { layer: "rose", models: petals };
const star = { layer: "star", models: { star: new m.models.Star(7, 55, 24, 2) } };
const border = { layer: "border", models: {
  frame: m.model.move(new m.models.RoundRectangle(420, 300, 35), [-210, -150]),
  eyes: { paths: { left: new m.paths.Circle([-170, -110], 12.5), right: new m.paths.Circle([170, -110], 12.5),
    smile: new m.paths.Arc([0, 40], 165, 215, 325) } },
  wave: m.model.move(new m.models.BezierCurve([[0, 0], [40, 60], [80, -60], [120, 0]], 0.05), [-60, 120]) } };
const all = { units: m.unitType.Millimeter, models: { rose, star, border } };
fs.writeFileSync("makerjs.svg", m.exporter.toSVG(all, { units: m.unitType.Millimeter, layerOptions: {
  rose: { stroke: "deeppink" }, star: { stroke: "rgb(255,200,0)" }, border: { stroke: "#08F", cssStyle: "stroke-linecap:round" } } }));
fs.writeFileSync("makerjs.dxf", m.exporter.toDXF(all, { units: m.unitType.Millimeter, layerOptions: {
  rose: { color: 6 }, star: { color: 2 }, border: { color: 5 } } }));
for (const [layer, model] of Object.entries({ rose, star, border })) {
  let count = 0, length = 0;
  m.model.walk(model, { onPath: p => { count++; length += m.measure.pathLength(p.pathContext); } });
  console.log(layer, count, length.toFixed(9));
}
