// The node-canvas interface that chartjs-node-canvas asks for, on top of @napi-rs/canvas.
module.exports = require("@napi-rs/canvas/node-canvas");
