## peak_rows (PEAKS): the gateway's columns of peaks, with or without a seventh row, as a struct of rows.
function s = peak_rows (peaks)
  s = struct ("largest", peaks(1,:), "time", peaks(2,:), "high", peaks(3,:), "high_time", peaks(4,:), "low", peaks(5,:),
              "low_time", peaks(6,:));
  if (rows (peaks) > 6)
    s.later = peaks(7,:);
  endif
endfunction
