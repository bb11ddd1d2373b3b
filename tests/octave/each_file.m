## The tests in every file of the functions, and their demonstrations, which only have to run.
1;

function [passed, failed] = tests_of (name)
  [passed, all] = test (name, "quiet", stdout);
  failed = all - passed;
  if (all == 0)
    printf ("%s has no tests\n", name);
    failed = 1;
  endif
endfunction

function [passed, failed] = demonstrations_of (name)
  [passed, failed] = deal (0, 0);
  [code, ends] = test (name, "grabdemo");
  for i = 1:numel (ends) - 1
    try
      f = figure ("visible", "off");
      eval (code(ends(i):ends(i+1) - 1));
      close (f);
      passed++;
    catch e
      printf ("demonstration %d of %s: %s\n", i, name, e.message);
      failed++;
    end_try_catch
  endfor
endfunction

## Every function is in the index, and has help in texinfo that begins with its name.
function ok = is_described (name, root)
  [text, format] = get_help_text (name);
  index = fileread (fullfile (root, "bindings/octave/INDEX"));
  ok = strcmp (format, "texinfo") && ! isempty (strfind (text, [name " ("])) ...
       && ! isempty (regexp (index, ["(?m)^ " name "$"]));
  if (! ok)
    printf ("%s is not described\n", name);
  endif
endfunction

## The numbers of private/check.m are the library's, by their words.
function [passed, failed] = statuses (root)
  lines = regexp (fileread (fullfile (root, "bindings/octave/inst/private/check.m")), '(-\d+), "(\w+)", "', "tokens");
  right = cellfun (@(t) isequal (__rampwise__ ("constant", ["RAMPWISE_ERROR_" upper(t{2})]), str2double (t{1})), lines);
  cellfun (@(t) printf ("status %s is not %s\n", t{:}), lines(! right));
  passed = sum (right);
  failed = sum (! right) + isempty (right);
endfunction

makeinfo_program ("true"); # print_usage runs it at every invalid call; the package's test looks at what it makes
warning ("off", "Octave:gnuplot-graphics");
graphics_toolkit ("gnuplot");
root = argv (){end};
[passed, failed] = statuses (root);
for file = dir (fullfile (root, "bindings/octave/inst/*.m")).'
  [~, name] = fileparts (file.name);
  [p, f] = tests_of (name);
  [q, g] = demonstrations_of (name);
  ok = is_described (name, root);
  passed += p + q + ok;
  failed += f + g + ! ok;
endfor
printf ("%d passed, %d failed\n", passed, failed);
exit (failed > 0);
