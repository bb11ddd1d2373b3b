## whole (): the options of a response to a whole record, and their values unless given.
function options = whole ()
  options = describe ();
  options.start = "at once";
  options.displacement = 0;
  options.velocity = 0;
  options.outputs = motions ()(1:4);
endfunction
