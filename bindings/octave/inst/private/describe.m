## describe (): the options by which every function takes its oscillators, and what they are fed with.
function options = describe ()
  options = struct ("period", [], "frequency", [], "omega", [], "damping", [], "mass", 1, "system", [],
                    "allow_strong_damping", false, "input", [], "between", "ramp");
endfunction
