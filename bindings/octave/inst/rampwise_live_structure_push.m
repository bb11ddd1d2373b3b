## -*- texinfo -*-
## @deftypefn  {} {} rampwise_live_structure_push (@var{s}, @var{p})
## @deftypefnx {} {@var{h} =} rampwise_live_structure_push (@var{s}, @var{p})
## Takes the structure @var{s} over the next samples @var{p}, a row each sample and a column each input; of one input any
## vector.
##
## @var{h} is a struct of matrices @code{displacement}, @code{velocity}, @code{acceleration} and @code{total_acceleration},
## a row each sample and a column each row of "rows"; and where there is equipment of @code{equipment}, a struct of the
## same four, a column each piece. The bits do not depend on how a record is cut into blocks. An overflow is a warning; the
## structure stays at the sample before, and values from there on are NaN.
## @seealso{rampwise_live_structure, rampwise_live_structure_read}
## @end deftypefn

function h = rampwise_live_structure_push (s, p)
  if (nargin != 2)
    print_usage ();
  endif
  caller = "rampwise_live_structure_push";
  [made, status, fault] = push_structure (caller, live_structure (caller, s), p, nargout > 0);
  if (status != 0)
    warning ("rampwise:overflow", "%s: response to P(%d): %s", caller, fault, __rampwise__ ("status_text", status));
  endif
  if (nargout > 0)
    h = made;
  endif
endfunction

%!function h = joined (parts)
%!  h = struct ();
%!  for name = {"displacement", "velocity", "acceleration", "total_acceleration"}
%!    h.(name{1}) = vertcat (parts.(name{1}));
%!  endfor
%!endfunction
%!shared M, K, C, p, dt, base
%! M = diag ([2, 2, 1]); K = 600 * [2, -1, 0; -1, 2, -1; 0, -1, 1]; C = 0.3 * M + 0.002 * K;
%! dt = 0.04; p = sin ((0:99).' .^ 1.2) + 0.5; base = {"input", "base acceleration"};
%!test # the bits of the whole record and its peaks, in any blocks, of the equipment too; begun anew
%! D = C; D(1,1) += 20;
%! for b = {rampwise_structure(M, C, K), rampwise_structure(M, D, K)}
%!   o = {base{:}, "displacement", [1, 0, -1], "velocity", [0, 3, 0], "equipment", rampwise_system("omega", [1, 9, 40], "damping", 0.02), "point", [3, 1, 2]};
%!   r = rampwise_structure_response (b{1}, p, dt, o{:});
%!   s = rampwise_live_structure (b{1}, dt, o{:});
%!   for again = 1:2
%!     h = rampwise_live_structure_push (s, p(1));
%!     h(2) = rampwise_live_structure_push (s, p(2:40).');
%!     h(3) = rampwise_live_structure_push (s, p(41:100));
%!     now = rampwise_live_structure_read (s);
%!     assert (joined (h), rmfield (r, {"time", "peaks", "equipment", "provenance"}));
%!     assert (joined ([h.equipment]), rmfield (r.equipment, "peaks"));
%!     assert (now.peaks, r.peaks);
%!     assert (now.equipment.peaks, r.equipment.peaks);
%!     rampwise_live_structure_start (s);
%!   endfor
%! endfor
%!test # several inputs: a row is a sample; none
%! b = rampwise_structure (M, C, K); o = {"input", "force", "on", [0, 1; 2, 0; 0, -3], "peaks", false};
%! s = rampwise_live_structure (b, dt, o{:});
%! r = rampwise_structure_response (b, [1, 2; 3, 4; 5, 6], dt, o{:});
%! h = rampwise_live_structure_push (s, []);
%! assert (size (h.velocity), [0, 3]);
%! h = [h, rampwise_live_structure_push(s, [1, 2]), rampwise_live_structure_push(s, [3, 4; 5, 6])];
%! assert (joined (h), rmfield (r, {"time", "provenance"}));
%! fail ("rampwise_live_structure_push (s, [1; 2])", "a column for each of the 2");
%!test # nothing refused changes anything, at the start neither
%! s = rampwise_live_structure (rampwise_structure (M, C, K), dt, base{:});
%! fail ("rampwise_live_structure_push (s, [1, 2, NaN])", "P.3.");
%! fail ("rampwise_live_structure_read (s)", "no sample was pushed yet");
%! rampwise_live_structure_push (s, p(1:9));
%! before = rampwise_live_structure_save (s);
%! fail ("rampwise_live_structure_push (s, [1, -Inf])", "P.2.");
%! assert (rampwise_live_structure_save (s), before);
%!test # an overflow is a warning: what came before stays
%! s = rampwise_live_structure (rampwise_structure (1, 0, 0.01), 1, "input", "force", "on", 1, "peaks", false);
%! warning ("off", "rampwise:overflow", "local");
%! h = rampwise_live_structure_push (s, 1e307 * ones (30, 1));
%! n = find (isnan (h.displacement), 1);
%! assert (n > 2 && all (isnan (h.velocity(n:end))));
%! assert (rampwise_live_structure_read (s).displacement, h.displacement(n - 1));
%!warning id=rampwise:overflow rampwise_live_structure_push (rampwise_live_structure (rampwise_structure (1, 0, 0.01), 1, "input", "force", "on", 1), 1e307 * ones (30, 1));
%!error <Invalid call> rampwise_live_structure_push (1)
%!error <S must come from rampwise_live_structure> rampwise_live_structure_push (1, 1)
%!error id=rampwise:overflow rampwise_structure_response (rampwise_structure (1, 0, 0.01), 1e307 * ones (1, 30), 1, "input", "force", "on", 1)
%!test # freed by hand
%! s = rampwise_live_structure (rampwise_structure (M, C, K), dt, base{:});
%! __rampwise__ ("object_free", s.object);
%! fail ("rampwise_live_structure_push (s, 1)", "there is no such structure");
