# The spectrum of response_spectrum as a picture, PNG and SVG:
#
#     gnuplot -c spectrum.gnuplot SPECTRUM.csv PICTURE "TITLE"
#
# writes PICTURE.png and PICTURE.svg: total acceleration and relative displacement against the
# natural period, one line for each damping, with its name beside the line and a band to the value
# less the sampling's estimated error; and below that the error itself.

if (ARGC != 3) { print "usage: gnuplot -c spectrum.gnuplot SPECTRUM.csv PICTURE TITLE"; exit status 2 }
spectrum = ARG1
picture = ARG2
picture_title = ARG3

set datafile separator comma
set encoding utf8

# A column for the period, then displacement, total acceleration, pseudo-acceleration, corrected
# displacement and corrected total acceleration of each damping. The first row has the names.
stats spectrum skip 6 nooutput
n_dampings = (STATS_columns - 1)/5
rows = STATS_records
array Name[n_dampings]
do for [d = 1:n_dampings] {
    stats spectrum using (heading = strcol(5*d - 3), 0) every ::0::0 nooutput
    Name[d] = heading[1:strstrt(heading, ": displacement") - 1]
}
set datafile columnheaders
stats spectrum using 1 nooutput
first = STATS_min
last = STATS_max

# Without damping the line is ragged: thin and grey, behind the others. Those are told apart by
# lightness as well, and by their order, so that no eye depends on the hue.
array Palette[8] = ["#123c73", "#b84300", "#1f9a8a", "#7a3f98", "#a08000", "#4f7fd0", "#c06080", "#202020"]
colour(d) = Name[d] eq "0 %" ? "#777777" : Palette[Name[1] eq "0 %" ? d - 1 : d]
width(d) = Name[d] eq "0 %" ? 1 : 2

# The column of a damping in a panel, that of the corrected value, and what both are to be multiplied by.
column_of(panel, d) = panel == 1 ? 5*d - 2 : 5*d - 3
corrected(panel, d) = panel == 1 ? 5*d + 1 : 5*d
scale(panel) = panel == 1 ? 1 : 1000

# The largest value of each line, and its period. Before any range is set, because ranges would keep
# points from the search.
array Largest[2*n_dampings]
array At[2*n_dampings]
array Reach[2] = [0, 0]
entry(panel, d) = (panel - 1)*n_dampings + d
do for [panel = 1:2] {
    do for [d = 1:n_dampings] {
        stats spectrum using 1:(scale(panel)*column(column_of(panel, d))) nooutput
        Largest[entry(panel, d)] = STATS_max_y
        At[entry(panel, d)] = STATS_pos_max_y
        Reach[panel] = STATS_max_y > Reach[panel] ? STATS_max_y : Reach[panel]
    }
}

# Where a name stands, in heights of a panel from its dot: above it, the last of several below, where no
# other line comes.
beside(d) = n_dampings > 1 && d == n_dampings ? -0.055 : 0.05

set logscale x
set xrange [first:last]
set xtics (0.001, 0.002, 0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100, 200, 500, 1000)
set grid xtics ytics linetype 1 linecolor "#dddddd" linewidth 0.6
set border 3 linecolor "#555555"
set tics nomirror scale 0.5
set lmargin at screen 0.085
set rmargin at screen 0.97
set style fill solid 0.3 noborder
set style textbox opaque fillcolor rgb "white" noborder margins 0,0
unset key

# The estimated error in per cent of the total acceleration, on a logarithmic scale: nothing below 0.001.
share(d) = 100*abs(column(corrected(1, d))/column(column_of(1, d)) - 1)
seen(x) = x > 0.001 ? x : NaN

do for [kind in "png svg"] {
    if (kind eq "png") { set terminal pngcairo size 1100,1140 font "sans,11" background "white"; title_font = ",14"; name_font = ",12"; dot = 0.9 }
    if (kind eq "svg") { set terminal svg size 1100,1140 font "sans,14" background "white"; title_font = ",18"; name_font = ",16"; dot = 0.6 }
    set output picture.".".kind
    set multiplot
    do for [panel = 1:2] {
        name = panel == 1 ? "largest total acceleration" : "largest displacement relative to the base"
        set tmargin at screen panel == 1 ? 0.91 : 0.575
        set bmargin at screen panel == 1 ? 0.625 : 0.29
        reach = Reach[panel] == 0 ? 1 : 1.13*Reach[panel]
        set yrange [0:reach]
        set label name at graph 0,1.05 left
        set label (panel == 1 ? "m/s²" : "mm") at screen 0.025, graph 0.5 center rotate by 90
        do for [d = 1:n_dampings] {
            set label Name[d] at At[entry(panel, d)], Largest[entry(panel, d)] + beside(d)*reach center front boxed \
                font name_font textcolor rgb colour(d) noenhanced
        }
        if (panel == 1) {
            set label picture_title at screen 0.5,0.979 center font title_font noenhanced
            set label "One line for each damping, in per cent of critical, named at its largest value (dot)." \
                at screen 0.5,0.957 center
        }
        set format x ""
        plot for [d = 1:n_dampings] spectrum using 1:(scale(panel)*column(column_of(panel, d))): \
                 (scale(panel)*column(corrected(panel, d))) with filledcurves linecolor rgb colour(d), \
             for [d = 1:n_dampings] spectrum using 1:(scale(panel)*column(column_of(panel, d))) \
                 with lines linewidth width(d) linecolor rgb colour(d), \
             for [d = 1:n_dampings] "+" using (At[entry(panel, d)]):(Largest[entry(panel, d)]) every ::0::0 \
                 with points pointtype 7 pointsize dot linecolor rgb colour(d)
        unset label
    }
    set tmargin at screen 0.24
    set bmargin at screen 0.065
    set logscale y
    set yrange [0.001:100]
    set ytics ("0.001" 0.001, "0.01" 0.01, "0.1" 0.1, "1" 1, "10" 10, "100" 100)
    set format x "%g"
    set xlabel "natural period (s)"
    set label "estimated error of the sampling, of the total acceleration (bands above, where they are wide enough to see)" \
        at graph 0,1.08 left
    set label "%" at screen 0.025, graph 0.5 center rotate by 90
    plot for [d = 1:n_dampings] spectrum using 1:(seen(share(d))) with lines linewidth width(d) linecolor rgb colour(d)
    unset label
    unset logscale y
    set ytics autofreq
    unset xlabel
    unset multiplot
    set output
}
