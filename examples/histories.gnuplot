# The histories of site_response as a picture, PNG and SVG:
#
#     gnuplot -c histories.gnuplot HISTORIES.csv PICTURE "TITLE"
#
# writes PICTURE.png and PICTURE.svg: on top the shake, below it one panel for each piece of gear
# with its relative displacement, the largest value marked.

if (ARGC != 3) { print "usage: gnuplot -c histories.gnuplot HISTORIES.csv PICTURE TITLE"; exit status 2 }
histories = ARG1
picture = ARG2
picture_title = ARG3

# Told apart by lightness and by shape as well, so that no eye depends on the hue.
shake_colour = "#555555"
gear_colour = "#15508a"
mark_colour = "#c24a00"

set datafile separator comma
set encoding utf8

# Two columns for the time and the shake, then displacement and acceleration of each piece. The
# first row has the names.
stats histories skip 4 nooutput
n_gear = (STATS_columns - 2) / 2
array Name[n_gear]
do for [j = 1:n_gear] {
    stats histories using (heading = strcol(2*j + 1), 0) every ::0::0 nooutput
    Name[j] = heading[1:strstrt(heading, ": displacement") - 1]
}
set datafile columnheaders

stats histories using 1 nooutput
first = STATS_min
last = STATS_max
in_ms = last - first < 1
time_scale = in_ms ? 1000 : 1
time_unit = in_ms ? "ms" : "s"

# The value furthest from zero in each panel, and its time. Before any range is set, because ranges
# would keep points from the search.
panels = n_gear + 1
array Column[panels]
array Largest[panels]
array At[panels]
do for [panel = 1:panels] {
    Column[panel] = panel == 1 ? 2 : 2*panel - 1
    stats histories using 1:Column[panel] nooutput
    low = -STATS_min_y > STATS_max_y
    Largest[panel] = (panel == 1 ? 1 : 1000)*(low ? STATS_min_y : STATS_max_y)
    At[panel] = time_scale*(low ? STATS_pos_min_y : STATS_pos_max_y)
}

# A round number below x, for the tics: 1, 2 or 5 times a power of ten.
power(x) = 10**floor(log10(0.85*x))
round_tic(x) = power(x)*(0.85*x >= 5*power(x) ? 5 : 0.85*x >= 2*power(x) ? 2 : 1)

height = 120 + 135*panels
top = 1 - 62.0/height
bottom = 58.0/height
share = (top - bottom)/panels

set xrange [time_scale*first:time_scale*(last + 0.005*(last - first))]
set grid xtics ytics linetype 1 linecolor "#dddddd" linewidth 0.6
set xzeroaxis linetype 1 linecolor "#999999" linewidth 0.8
set border 3 linecolor "#555555"
set tics nomirror scale 0.5
set minussign
set lmargin at screen 0.085
set rmargin at screen 0.98
set style line 1 linecolor rgb shake_colour linewidth 1.1
set style line 2 linecolor rgb gear_colour linewidth 1.3
set style line 3 linecolor rgb mark_colour pointtype 7
unset key

do for [kind in "png svg"] {
    if (kind eq "png") { set terminal pngcairo size 1100,height font "sans,11" background "white"; title_font = ",14"; dot = 0.9 }
    if (kind eq "svg") { set terminal svg size 1100,height font "sans,14" background "white"; title_font = ",18"; dot = 0.6 }
    set output picture.".".kind
    set multiplot
    do for [panel = 1:panels] {
        scale = panel == 1 ? 1 : 1000
        unit = panel == 1 ? "m/s²" : "mm"
        name = panel == 1 ? "base acceleration" : Name[panel - 1]
        line = panel == 1 ? 1 : 2
        reach = Largest[panel] == 0 ? 1 : 1.2*abs(Largest[panel])
        tic = round_tic(reach)

        set tmargin at screen top - (panel - 0.79)*share
        set bmargin at screen top - (panel - 0.04)*share
        set yrange [-reach:reach]
        set ytics -tic, tic, tic
        set label name at graph 0,1.11 left noenhanced
        set label gprintf("largest %.4g ", Largest[panel]).unit.gprintf(" at %.4g ", At[panel]).time_unit \
            at graph 1,1.11 right textcolor rgb mark_colour noenhanced
        set label unit at screen 0.03, graph 0.5 center rotate by 90 noenhanced
        if (panel == 1) {
            set label picture_title at screen 0.5,1 - 20.0/height center font title_font noenhanced
            set label "Grey: the shake. Blue: displacement of each piece relative to its base. Dot: largest value." \
                at screen 0.5,1 - 44.0/height center noenhanced
        }
        if (panel == panels) { set format x "%g"; set xlabel "time (".time_unit.")" } \
        else { set format x ""; unset xlabel }
        plot histories using (time_scale*$1):(scale*column(Column[panel])) with lines linestyle line, \
             "+" using (At[panel]):(Largest[panel]) every ::0::0 with points linestyle 3 pointsize dot
        unset label
    }
    unset multiplot
    set output
}
