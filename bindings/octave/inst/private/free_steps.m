## free_steps (): how many steps of a structure's free motion are looked at for peaks unless it is said, at most.
function n = free_steps ()
  n = 100000;
endfunction
