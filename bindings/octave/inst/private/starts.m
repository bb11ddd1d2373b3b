## starts (): the ways to begin a record, in the order of the gateway's numbers, which count from 0.
function words = starts ()
  words = {"at once", "ramp", "settled"};
endfunction
