## ending_of (CALLER, OPTIONS): what the gateway's commands end in for the option "precision".
function ending = ending_of (caller, options)
  ending = {"", "_f32"}{choice(caller, "precision", options.precision, {"double", "single"})};
endfunction
