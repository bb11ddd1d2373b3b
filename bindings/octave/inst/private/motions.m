## motions (): the histories of a response, in the order of the gateway's.
function words = motions ()
  words = {"displacement", "velocity", "acceleration", "total acceleration", "relative displacement", ...
           "relative velocity", "spring force", "damper force"};
endfunction
