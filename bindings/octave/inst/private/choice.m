## choice (CALLER, NAME, X, WORDS): which of WORDS the option NAME is, from 1.
function i = choice (caller, name, x, words)
  i = [];
  if (ischar (x))
    i = find (strcmpi (x, words));
  endif
  if (isempty (i))
    error ("rampwise:option", "%s: option '%s' must be one of: %s", caller, name, strjoin (words, ", "));
  endif
endfunction
