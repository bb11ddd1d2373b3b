## parse (CALLER, DEFAULTS, PAIRS): the option pairs of a call, in the fields of DEFAULTS.
## Names are compared without regard to case; an option that is unknown, or given twice, is refused.
function options = parse (caller, defaults, pairs)
  options = defaults;
  known = fieldnames (defaults);
  given = {};
  if (mod (numel (pairs), 2) != 0)
    error ("rampwise:option", "%s: options come in pairs of a name and a value", caller);
  endif
  for i = 1:2:numel (pairs)
    name = pairs{i};
    if (! ischar (name) || ! isrow (name) || ! any (strcmpi (name, known)))
      if (! ischar (name))
        name = sprintf ("argument %d of the pairs", i);
      endif
      error ("rampwise:option", "%s: no option '%s'; there are: %s", caller, name, strjoin (known.', ", "));
    endif
    name = lower (name);
    if (any (strcmp (name, given)))
      error ("rampwise:option", "%s: option '%s' is given twice", caller, name);
    endif
    given{end+1} = name;
    options.(name) = pairs{i+1};
  endfor
endfunction
