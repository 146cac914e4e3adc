// A fish of smooth curves over waves: paper 0.12.18 (paper-jsdom), node 20.
// Writes paper.svg and prints the lengths of the lines by the library itself.
const paper = require("paper-jsdom");
const fs = require("fs");
paper.setup(new paper.Size(400, 260));
const fish = new paper.Path({ segments: [[60, 130], [150, 70], [260, 80], [330, 40], [310, 130], [330, 220], [260, 180], [150, 190]],
  closed: true, strokeColor: "#ff3030", strokeWidth: 3, name: "fish" });
fish.smooth({ type: "catmull-rom", factor: 0.5 });
const eye = new paper.Path.Circle({ center: [110, 115], radius: 9, strokeColor: "#c0c0c0" });
const bubbles = new paper.Group({ name: "bubbles" });
for (let i = 0; i < 4; i++) bubbles.addChild(new paper.Shape.Circle({ center: [40 - 5 * i, 90 - 20 * i], radius: 4 + i, strokeColor: "#30c0ff" }));
bubbles.rotate(15);
bubbles.scale(1.5, 1);
const wave = new paper.Path({ strokeColor: "#3030ff", strokeCap: "round" });
for (let x = 20; x <= 380; x += 40) wave.add([x, 240 + (x / 40 % 2 < 1 ? 8 : -8)]);
wave.smooth({ type: "continuous" });
const card = new paper.Shape.Rectangle({ rectangle: [5, 5, 390, 250], radius: 20, strokeColor: "#208040", dashArray: [10, 4] });
const moon = new paper.Path.Circle([330, 200], 30).subtract(new paper.Path.Circle([345, 190], 28));
moon.strokeColor = "#ffd000"; moon.fillColor = new paper.Color(1, 0.8, 0, 0.4);
const name = new paper.PointText({ point: [180, 35], content: "FISH", fillColor: "black" });
fs.writeFileSync("paper.svg", paper.project.exportSVG({ asString: true, precision: 5 }));
console.log("#ff3030", fish.length, "#c0c0c0", eye.length, "#3030ff", wave.length, "#ffd000", moon.length);
console.log("bubbles", bubbles.children.map(c => c.toPath(false)).map(p => (p.transform(bubbles.matrix), p.length)).join(" "));
console.log("card", card.toPath(false).length, "closed form", 2 * 350 + 2 * 210 + 40 * Math.PI);
