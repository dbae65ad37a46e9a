import * as canal from "./canal.mjs";
import * as hills from "./hills.mjs";
import * as lanes from "./lanes.mjs";
import * as water from "./water.mjs";
import * as woods from "./woods.mjs";

export const SCENES = { ...woods, ...hills, ...canal, ...water, ...lanes };
