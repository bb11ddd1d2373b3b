## peak_rows (SIX): the gateway's columns of peaks as a struct of rows.
function s = peak_rows (six)
  s = struct ("largest", six(1,:), "time", six(2,:), "high", six(3,:), "high_time", six(4,:), "low", six(5,:), "low_time",
              six(6,:));
endfunction
