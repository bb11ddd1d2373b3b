#include "outline.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "rampwise/status.h"

static const double pi = 3.141592653589793;

static double cross(point a, point b)
{
    return a.x * b.y - a.y * b.x;
}

static double dot(point a, point b)
{
    return a.x * b.x + a.y * b.y;
}

static point minus(point a, point b)
{
    return (point){a.x - b.x, a.y - b.y};
}

static point opposite(point a)
{
    return (point){-a.x, -a.y};
}

static double length(point a)
{
    return sqrt(dot(a, a));
}

/* Corner i all the way round and on, from -count to 3 count. */
static point corner(const outline *o, ptrdiff_t i)
{
    const ptrdiff_t n = (ptrdiff_t)o->count;
    int turned = 0;
    if (i >= 0 && i < n)
        return o->corner[i];
    for (; i < 0; i += n)
        turned = !turned;
    for (; i >= n; i -= n)
        turned = !turned;
    return turned ? opposite(o->corner[i]) : o->corner[i];
}

void rampwise_outline_clear_(outline *o)
{
    free(o->corner);
    free(o->spare);
    memset(o, 0, sizeof *o);
}

/* The last corner that comes before *p or at its angle, counterclockwise from the first one; *p becomes its own
   opposite where it is on the other side. */
static ptrdiff_t sector_of(const outline *o, point *p)
{
    if (cross(o->corner[0], *p) < 0)
        *p = opposite(*p);
    size_t low = 0, high = o->count;
    while (high - low > 1) {
        const size_t middle = low + (high - low) / 2;
        if (cross(o->corner[middle], *p) >= 0)
            low = middle;
        else
            high = middle;
    }
    return (ptrdiff_t)low;
}

static double distance_from(point p, point begin, point end)
{
    const point along = minus(end, begin), to = minus(p, begin);
    const double square = dot(along, along), share = dot(to, along) / square;
    if (!(share > 0))
        return length(to);
    if (share >= 1)
        return length(minus(p, end));
    return fabs(cross(along, to)) / sqrt(square);
}

/* Beyond the edge from begin to end, on its outer side as far as the rounding of points lets one see, and further
   from it than `slack`, a share of the largest. */
static int is_beyond(const outline *o, point p, point begin, point end, double slack)
{
    const point along = minus(end, begin);
    const double unsure = OUTLINE_ROUNDING * o->largest * (fabs(along.x) + fabs(along.y));
    if (cross(along, minus(p, begin)) > unsure)
        return 0;
    return distance_from(p, begin, end) > slack * o->largest;
}

int rampwise_outline_holds_(const outline *o, point p, double slack)
{
    if (o->count == 0)
        return p.x == 0 && p.y == 0;
    const ptrdiff_t sector = sector_of(o, &p);
    /* Beyond the edge of its sector; the nearest of all edges can only be nearer. */
    return !is_beyond(o, p, corner(o, sector), corner(o, sector + 1), slack);
}

/* The corner that is farthest in a direction, from corner i on counterclockwise; directions that turn
   counterclockwise are asked in order. */
static ptrdiff_t farthest(const outline *o, ptrdiff_t i, point direction)
{
    const ptrdiff_t end = i + (ptrdiff_t)o->count;
    while (i < end && dot(corner(o, i + 1), direction) > dot(corner(o, i), direction))
        ++i;
    return i;
}

static point direction_of(size_t m, size_t count)
{
    const double angle = pi * (double)m / (double)count;
    return (point){cos(angle), sin(angle)};
}

/* Where to begin: the corner that is farthest along x, the first of two. */
static ptrdiff_t first_corner(const outline *o)
{
    ptrdiff_t best = 0;
    for (ptrdiff_t i = 1; i < 2 * (ptrdiff_t)o->count; ++i)
        if (corner(o, i).x > corner(o, best).x)
            best = i;
    return best;
}

static void exchange(outline *o)
{
    point *const before = o->corner;
    o->corner = o->spare;
    o->spare = before;
}

/* Keeps the farthest corner of each direction. */
static void thin(outline *o)
{
    const ptrdiff_t first = first_corner(o);
    ptrdiff_t i = first, last = first - 1;
    size_t kept = 0;
    for (size_t m = 0; m < o->directions; ++m) {
        i = farthest(o, i, direction_of(m, o->directions));
        if (i != last && i < first + (ptrdiff_t)o->count)
            o->spare[kept++] = corner(o, last = i);
    }
    exchange(o);
    o->count = kept;
    o->thinned = 1;
}

static int grow(outline *o)
{
    const size_t room = o->room > 0 ? 2 * o->room : 32;
    point *const new_corner = malloc(room * sizeof *new_corner);
    point *const new_spare = malloc(room * sizeof *new_spare);
    if (new_corner == NULL || new_spare == NULL) {
        free(new_corner);
        free(new_spare);
        return RAMPWISE_ERROR_MEMORY;
    }
    if (o->count > 0)
        memcpy(new_corner, o->corner, o->count * sizeof *new_corner);
    free(o->corner);
    free(o->spare);
    o->corner = new_corner;
    o->spare = new_spare;
    o->room = room;
    return RAMPWISE_OK;
}

/* p in its sector becomes a corner; those beside it that do not stick out any more go. Where that is over the end of
   the list, p becomes the first. */
static void insert(outline *o, ptrdiff_t sector, point p)
{
    const ptrdiff_t n = (ptrdiff_t)o->count;
    ptrdiff_t after = sector + 1, before = sector;
    while (after <= before + n) {
        const point next = after < before + n ? corner(o, after + 1) : opposite(p);
        if (is_beyond(o, corner(o, after), p, next, OUTLINE_ROUNDING))
            break;
        ++after;
    }
    while (before + n >= after) {
        const point last = before + n > after ? corner(o, before - 1) : opposite(p);
        if (is_beyond(o, corner(o, before), last, p, OUTLINE_ROUNDING))
            break;
        --before;
    }
    if (before >= 0 && after <= n) {
        memmove(o->corner + before + 2, o->corner + after, (size_t)(n - after) * sizeof p);
        o->corner[before + 1] = p;
        o->count = (size_t)(before + 2 + n - after);
        return;
    }
    size_t count = 0;
    o->spare[count++] = p;
    for (ptrdiff_t i = after; i <= before + n; ++i)
        o->spare[count++] = corner(o, i);
    exchange(o);
    o->count = count;
}

int rampwise_outline_add_(outline *o, point p, double slack)
{
    if (rampwise_outline_holds_(o, p, slack))
        return RAMPWISE_OK;
    if (o->count == o->room) {
        if (o->directions > 0)
            thin(o);
        else if (grow(o) != RAMPWISE_OK)
            return RAMPWISE_ERROR_MEMORY;
    }
    if (o->count > 0) {
        const ptrdiff_t sector = sector_of(o, &p);
        insert(o, sector, p);
    } else {
        o->corner[o->count++] = p;
    }
    o->largest = fmax(o->largest, length(p));
    return RAMPWISE_OK;
}

static double in_range(double a)
{
    return fmax(-DBL_MAX, fmin(DBL_MAX, a));
}

/* The line through two corners, moved out by half the slack. */
static void side_through(double slack, point begin, point end, double side[2])
{
    const point along = minus(end, begin);
    const double far = cross(begin, end) + 0.5 * slack * length(along);
    side[0] = far > 0 ? in_range(along.y / far) : 0;
    side[1] = far > 0 ? in_range(-along.x / far) : 0;
}

/* The corner of begin to end (numbers of corners) that is farthest beyond their line; one of them where there is
   none between. */
static ptrdiff_t beyond(const outline *o, ptrdiff_t begin, ptrdiff_t end)
{
    const point from = corner(o, begin), along = minus(corner(o, end), from);
    ptrdiff_t best = begin;
    double most = 0;
    for (ptrdiff_t i = begin + 1; i < end; ++i) {
        const double far = cross(minus(corner(o, i), from), along);
        if (far > most) {
            most = far;
            best = i;
        }
    }
    return best;
}

/* The corner farthest from the origin. */
static ptrdiff_t far_corner(const outline *o)
{
    ptrdiff_t best = 0;
    for (ptrdiff_t i = 1; i < (ptrdiff_t)o->count; ++i)
        if (dot(corner(o, i), corner(o, i)) > dot(corner(o, best), corner(o, best)))
            best = i;
    return best;
}

/* Of the corner a that is farthest from the origin, the corner c farthest from the line of a, and one beyond either
   side of their parallelogram. No angle of that but those at a and -a can be below a right one (at c by Thales, |c| <=
   |a|; at the others because they lie no farther out than a, and no farther from a's line than c), so that only
   there sides that are moved out meet far outside: there the length along a is limited. */
void rampwise_outline_sides_(const outline *o, double slack, double side[SIDES][2])
{
    memset(side, 0, SIDES * sizeof *side);
    if (o->count == 0) { /* nothing but zero is inside */
        side[0][0] = side[1][1] = DBL_MAX;
        return;
    }
    const ptrdiff_t n = (ptrdiff_t)o->count;
    ptrdiff_t at[5] = {far_corner(o)};
    at[4] = at[0] + n;
    at[2] = beyond(o, at[0], at[4]);
    at[1] = beyond(o, at[0], at[2]);
    at[3] = beyond(o, at[2], at[4]);
    for (int k = 0; k < 4; ++k)
        if (at[k] != at[k + 1])
            side_through(slack * o->largest, corner(o, at[k]), corner(o, at[k + 1]), side[k]);
    const point a = corner(o, at[0]);
    side[4][0] = in_range(a.x / dot(a, a));
    side[4][1] = in_range(a.y / dot(a, a));
}

/* At right angles to an edge, outwards. */
static point outward(point edge)
{
    return (point){edge.y, -edge.x};
}

/* Corners so near the line of the farthest that rounding decides in which order they come. */
static int is_needle(const outline *o, point far)
{
    const double width = 64 * OUTLINE_ROUNDING * dot(far, far);
    for (size_t i = 0; i < o->count; ++i)
        if (fabs(cross(far, o->corner[i])) > width)
            return 0;
    return 1;
}

/* A corner is the farthest between the directions at right angles to its two edges. */
size_t rampwise_outline_arcs_(const outline *o, arc *arcs)
{
    if (o->count > 1) {
        point far = o->corner[far_corner(o)];
        if (is_needle(o, far)) {
            const outline line = {.count = 1, .corner = &far};
            return rampwise_outline_arcs_(&line, arcs);
        }
    }
    point begin = {0, 0};
    double s_begin = 0;
    for (size_t i = 0; i < o->count; ++i) {
        const point v = o->corner[i], edge = minus(corner(o, (ptrdiff_t)i + 1), v), end = outward(edge);
        const double s_end = fmax(0, cross(v, edge)) / length(edge);
        arcs[i] = (arc){v, begin, end, length(v), s_begin, s_end};
        begin = end;
        s_begin = s_end;
    }
    if (o->count > 0) { /* the edge before the first corner is the opposite of the last one */
        arcs[0].begin = opposite(begin);
        arcs[0].s_begin = s_begin;
    }
    return o->count;
}

static double turn(point from, point to)
{
    return atan2(cross(from, to), dot(from, to));
}

/* The part of an arc where S = size cos(phi - the corner's angle) is above the level. */
static double part_above(const arc *a, double level, double *rate)
{
    const double half = acos(level / a->size), slope = 1 / sqrt((a->size - level) * (a->size + level));
    double low = turn(a->corner, a->begin), high = turn(a->corner, a->end);
    if (low >= half || high <= -half)
        return 0;
    if (low < -half) {
        low = -half;
        *rate += slope;
    }
    if (high > half) {
        high = half;
        *rate += slope;
    }
    return high - low;
}

/* The measure of the angles where S is above the level, and how fast that falls as the level rises. Whole arcs in a
   row are one turn. */
static double angles_above(size_t count, const arc *arcs, double level, double *rate)
{
    double sum = 0;
    size_t whole = 0; /* whole arcs before i */
    *rate = 0;
    for (size_t i = 0; i <= count; ++i) {
        if (i < count && arcs[i].s_begin > level && arcs[i].s_end > level) {
            ++whole;
            continue;
        }
        if (whole > 0)
            sum += fabs(turn(arcs[i - whole].begin, arcs[i - 1].end)); /* as much as half a turn */
        whole = 0;
        if (i < count && arcs[i].size > level)
            sum += part_above(&arcs[i], level, rate);
    }
    return sum;
}

/* Newton's steps, halving where one leaves the bracket. */
double rampwise_arcs_percentile_(size_t count, const arc *arcs, double percent)
{
    double low = count > 0 ? arcs[0].s_begin : 0, high = 0;
    for (size_t i = 0; i < count; ++i) {
        low = fmin(low, arcs[i].s_end);
        high = fmax(high, arcs[i].size);
    }
    if (percent == 100 || percent == 0)
        return percent == 0 ? low : high;
    const double wanted = pi * (1 - percent / 100);
    double level = low + (high - low) * (percent / 100);
    for (int i = 0; i < 200 && low < high; ++i) {
        double rate;
        const double more = angles_above(count, arcs, level, &rate) - wanted;
        if (more > 0)
            low = level;
        else
            high = level;
        double next = level + more / rate;
        if (!(next >= low && next <= high))
            next = low + 0.5 * (high - low);
        if (fabs(next - level) <= 2 * DBL_EPSILON * level)
            return next;
        level = next;
    }
    return level;
}

/* Each line is x cos phi + y sin phi = S(phi); neighbours meet in a corner, which is the farthest between them. */
size_t rampwise_outline_arcs_around_(const outline *o, arc *arcs)
{
    if (o->count == 0)
        return 0;
    ptrdiff_t i = first_corner(o);
    const double apart = sin(pi / (double)o->directions);
    point direction = direction_of(0, o->directions);
    double far = dot(corner(o, i), direction);
    for (size_t m = 0; m < o->directions; ++m) {
        const point next = direction_of(m + 1, o->directions);
        i = farthest(o, i, next);
        const double next_far = dot(corner(o, i), next);
        const point meet = {(far * next.y - next_far * direction.y) / apart,
                            (next_far * direction.x - far * next.x) / apart};
        arcs[m] = (arc){meet, direction, next, length(meet), far, next_far};
        direction = next;
        far = next_far;
    }
    return o->directions;
}
