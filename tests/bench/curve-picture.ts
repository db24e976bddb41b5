import { saveCurvePicture } from "./engine/curve-picture";

/** Draws the picture of shared/engine/README.md anew. `npm run bench -- curve-picture` */
console.log(`Saved ${saveCurvePicture()}`);
