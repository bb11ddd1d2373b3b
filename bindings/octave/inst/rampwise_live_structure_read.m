## -*- texinfo -*-
## @deftypefn {} {@var{now} =} rampwise_live_structure_read (@var{s})
## What the structure @var{s} does at the present sample, and its peaks from the first sample to here.
##
## @var{now} is a struct of rows @code{displacement}, @code{velocity}, @code{acceleration} and @code{total_acceleration}, an
## element each row of "rows"; of @code{peaks} as in @code{rampwise_structure_response}, with times from the first sample
## on; and where there is equipment of @code{equipment}, a struct of @code{displacement} and @code{velocity} against its
## point, an element each piece, and @code{peaks} of displacement and total acceleration. There are no peaks where option
## "peaks" is false.
## @seealso{rampwise_live_structure, rampwise_live_structure_push}
## @end deftypefn

function now = rampwise_live_structure_read (s)
  if (nargin != 1)
    print_usage ();
  endif
  caller = "rampwise_live_structure_read";
  now = read_structure (caller, live_structure (caller, s));
endfunction

%!test # the last row of what was pushed; equipment begins at rest against its point
%! b = rampwise_structure (eye (2), [], [20, -10; -10, 10], "damping", 0.05); o = {"input", "base acceleration"};
%! e = {"equipment", rampwise_system("period", [0.5; 1; 2], "damping", 0.05), "point", 2};
%! s = rampwise_live_structure (b, 0.1, o{:}, e{:}, "peaks", false);
%! h = rampwise_live_structure_push (s, 3);
%! assert (h.total_acceleration, [0, 0], 1e-14);
%! assert (h.equipment.acceleration, -h.total_acceleration([2, 2, 2]));
%! assert ([h.equipment.displacement; h.equipment.velocity; h.equipment.total_acceleration], zeros (3));
%! h = rampwise_live_structure_push (s, [1, 4, 2]);
%! now = rampwise_live_structure_read (s);
%! assert (fieldnames (now), {"displacement"; "velocity"; "acceleration"; "total_acceleration"; "equipment"});
%! assert (now.total_acceleration, h.total_acceleration(3,:));
%! assert (now.equipment, struct ("displacement", h.equipment.displacement(3,:), "velocity", h.equipment.velocity(3,:)));
%!error <Invalid call> rampwise_live_structure_read ()
%!error <S must come from> rampwise_live_structure_read (1)
