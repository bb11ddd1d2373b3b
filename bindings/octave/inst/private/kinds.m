## kinds (CALLER, OPTIONS, INPUTS): the library's numbers for the options "input", one of INPUTS, and "between".
function [input, between] = kinds (caller, options, inputs = {"force", "base acceleration", "base velocity", ...
                                                              "base displacement"})
  if (isempty (options.input))
    error ("rampwise:option", "%s: option 'input' is needed, one of: %s", caller, strjoin (inputs, ", "));
  endif
  input = number_of (inputs{choice (caller, "input", options.input, inputs)});
  betweens = {"ramp", "hold"};
  between = number_of (betweens{choice (caller, "between", options.between, betweens)});
endfunction

function x = number_of (words)
  x = __rampwise__ ("constant", ["RAMPWISE_", strrep(upper (words), " ", "_")]);
endfunction
