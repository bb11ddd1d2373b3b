## -*- texinfo -*-
## @deftypefn  {} {@var{x} =} rampwise_list (@var{first}, @var{last}, @var{n})
## @deftypefnx {} {@var{x} =} rampwise_list (@var{first}, @var{last}, @var{n}, "per octave")
## A column of periods or frequencies at equal ratios, for a spectrum.
##
## @var{n} values from @var{first} to @var{last}, both above 0; or @var{n} to each doubling from @var{first} upwards,
## with @var{last} if it is met.
## @seealso{rampwise_spectrum}
## @end deftypefn

function x = rampwise_list (first, last, n, what)
  if (nargin < 3)
    print_usage ();
  endif
  caller = "rampwise_list";
  command = "list_log";
  if (nargin == 4)
    choice (caller, "fourth argument", what, {"per octave"});
    command = "list_octaves";
  endif
  n = scalar (caller, "N", n);
  if (! (n >= 1 && n <= 1e7 && n == fix (n)))
    error ("rampwise:count", "%s: N must be a whole number from 1 to 1e7", caller);
  endif
  [status, fault, x] = __rampwise__ (command, scalar (caller, "FIRST", first), scalar (caller, "LAST", last), n);
  if (status != 0)
    error ("rampwise:argument", "%s: FIRST and LAST must be above 0, and LAST not below FIRST per octave", caller);
  endif
endfunction

%!assert (rampwise_list (0.02, 2, 3), [0.02; 0.2; 2], 4 * eps)
%!assert (rampwise_list (3, 1, 2), [3; 1])
%!assert (rampwise_list (1, 8, 1, "per octave"), [1; 2; 4; 8])
%!assert (rampwise_list (1, 7, 2, "per octave"), 2 .^ (0:0.5:2.5).', 4 * eps)
%!error <Invalid call> rampwise_list (1, 2)
%!error id=rampwise:argument rampwise_list (0, 2, 3)
%!error id=rampwise:argument rampwise_list (2, 1, 3, "per octave")
%!error id=rampwise:count rampwise_list (1, 2, 0)
%!error id=rampwise:count rampwise_list (1, 2, NaN)
%!error id=rampwise:option rampwise_list (1, 2, 3, "per decade")
