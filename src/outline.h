/* The outline of the points +-(x, y) of a motion: their convex hull, which is symmetric about the origin. Its
   support function is S(phi), the largest |x cos phi + y sin phi|. */
#ifndef RAMPWISE_OUTLINE_H
#define RAMPWISE_OUTLINE_H

#include <stddef.h>

typedef struct point {
    double x, y;
} point;

/* The slack for what rounding does to points that lie in a line. */
#define OUTLINE_ROUNDING 1.8e-15

/* The corners of one half, counterclockwise from any of them; after the last comes minus the first. */
typedef struct outline {
    size_t count, room;
    size_t sector;         /* where the last point was asked for: the next is mostly near */
    size_t changes;        /* corners that came */
    point *corner, *spare; /* [room] each; they change places */
    double largest;        /* distance of a corner from the origin */
    size_t directions; /* 0: the memory grows. Else room is 2 directions; when that is full, it is thinned */
    int thinned;
} outline;

/* The points p with (form[0] p)^2 + (form[1] p)^2 <= size^2: an ellipse. Cheap to
   ask, and most points pass. */
typedef struct ellipse {
    point form[2];
    double size;
    double length, determinant,
        longest; /* a length; in that length: of the forms; the longest half axis of size 1 */
} ellipse;

/* A zeroed outline is empty and grows; clear frees its memory and makes it so again. */
void rampwise_outline_clear_(outline *o);

/* Whether the outline holds the point, or it sticks out by no more than the slack, a share of `largest`. */
int rampwise_outline_holds_(outline *o, point p, double slack);

/* Takes a point in unless it is held. RAMPWISE_ERROR_MEMORY where there is no memory to grow. */
int rampwise_outline_add_(outline *o, point p, double slack);

/* An ellipse inside the outline, to `slack` of the largest; and its largest size after the outline has grown.
   S of the ellipse exceeds S of the outline by sqrt(2) of the slack at most. */
void rampwise_outline_ellipse_(const outline *o, double slack, ellipse *e);
void rampwise_outline_inscribe_(const outline *o, double slack, ellipse *e);

/* How much larger, squared, an ellipse is in another's forms than in its own, at most. */
double rampwise_ellipse_larger_(const ellipse *e, const ellipse *other);

/* Directions, from begin to end counterclockwise (of any length), in which one corner is the farthest: there
   S(phi) = size cos(phi - the corner's angle), s_begin and s_end at the ends. */
typedef struct arc {
    point corner, begin, end;
    double size, s_begin, s_end;
} arc;

/* The arcs of the corners, arcs[count], and those of the polygon whose sides touch the
   outline in its `directions` directions, arcs[directions], which holds all that the outline
   has lost. They answer how many. */
size_t rampwise_outline_arcs_(const outline *o, arc *arcs);
size_t rampwise_outline_arcs_around_(const outline *o, arc *arcs);

/* The percentile of S(phi), phi uniform over all arcs. */
double rampwise_arcs_percentile_(size_t count, const arc *arcs, double percent);

#endif
