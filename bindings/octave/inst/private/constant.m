## constant (NAME): the library's constant RAMPWISE_NAME.
function x = constant (name)
  x = __rampwise__ ("constant", ["RAMPWISE_" name]);
endfunction
