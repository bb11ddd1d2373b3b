## structure_options (): the options of a structure under samples, and their values unless given.
function options = structure_options ()
  options = struct ("input", [], "on", [], "rows", [], "between", "ramp", "displacement", [], "velocity", [], "modes", [],
                    "static_correction", false, "equipment", [], "point", [], "peaks", true);
endfunction
