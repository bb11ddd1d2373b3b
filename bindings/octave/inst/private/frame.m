## frame (CALLER, OPTIONS): the library's number for the option "frame" of energies.
function x = frame (caller, options)
  words = {"relative", "absolute"};
  x = constant (upper (words{choice(caller, "frame", options.frame, words)}));
endfunction
