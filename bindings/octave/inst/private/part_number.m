## part_number (CALLER, PART, PARTS): the library's number for the option 'part', one of PARTS: 0 for "primary".
function number = part_number (caller, part, parts = {"primary", "residual", "maximax"})
  number = 0;
  part = parts{choice(caller, "part", part, parts)};
  if (! strcmp (part, "primary"))
    number = constant (upper (part));
  endif
endfunction
