## outputs (CALLER, WORDS, KNOWN): which of KNOWN the outputs WORDS are, from 1, and the fields they go by.
function [which, fields] = outputs (caller, words, known)
  if (ischar (words))
    words = {words};
  endif
  if (! iscellstr (words) || isempty (words) || numel (words) > 8)
    error ("rampwise:option", "%s: outputs are one to eight of: %s", caller, strjoin (known, ", "));
  endif
  which = cellfun (@(w) choice (caller, "output", w, known), words(:).');
  fields = strrep (known(which), " ", "_");
  if (numel (unique (which)) != numel (which))
    error ("rampwise:option", "%s: an output is named twice", caller);
  endif
endfunction
