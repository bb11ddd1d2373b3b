#include "outline.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include "rampwise/status.h"

static const double pi = 3.141592653589793;

static double larger(double a, double b)
{
    return a > b ? a : b;
}

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

static int is_from(const outline *o, size_t i, point p)
{
    return cross(o->corner[i], p) >= 0;
}

/* The last corner that comes before *p or at its angle, counterclockwise from the first one; *p becomes its
   own opposite where it is on the other side. */
static ptrdiff_t sector_of(outline *o, point *p)
{
    if (!is_from(o, 0, *p))
        *p = opposite(*p);
    size_t low = 0, high = o->count;
    const size_t near = o->sector < o->count ? o->sector : 0;
    if (is_from(o, near, *p)) {
        low = near;
        high = high - low > 2 && !is_from(o, low + 2, *p) ? low + 2 : high;
    } else {
        high = near;
        low = high > 2 && is_from(o, high - 2, *p) ? high - 2 : low;
    }
    while (high - low > 1) {
        const size_t middle = low + (high - low) / 2;
        if (is_from(o, middle, *p))
            low = middle;
        else
            high = middle;
    }
    o->sector = low;
    return (ptrdiff_t)low;
}

/* Beyond the edge from begin to end, on its outer side as far as the rounding of points lets one see, and
   further from it than `slack`, a share of the largest. */
static int is_beyond(const outline *o, point p, point begin, point end, double slack)
{
    const point along = minus(end, begin), to = minus(p, begin);
    const double area = cross(along, to),
                 unsure = OUTLINE_ROUNDING * o->largest * (fabs(along.x) + fabs(along.y));
    if (area > unsure)
        return 0;
    const double share = dot(to, along), square = dot(along, along), allowed = slack * o->largest;
    if (!(share > 0))
        return length(to) > allowed;
    if (share >= square)
        return length(minus(p, end)) > allowed;
    return fabs(area) > allowed * sqrt(square);
}

int rampwise_outline_holds_(outline *o, point p, double slack)
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

/* p in its sector becomes a corner; those beside it that do not stick out any more go. Where that is over the
   end of the list, p becomes the first. */
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
    ++o->changes;
    return RAMPWISE_OK;
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

/* Second moments of area, in lengths of the farthest corner along and across it. */
typedef struct moments {
    double along, both, across;
} moments;

static moments moments_of(const outline *o, point along, point across)
{
    moments m = {0, 0, 0};
    const point last = opposite(o->corner[o->count - 1]);
    point a = {dot(along, last), dot(across, last)};
    for (size_t i = 0; i < o->count; ++i) {
        const point b = {dot(along, o->corner[i]), dot(across, o->corner[i])};
        const double area = fabs(cross(a, b));
        m.along += area * (a.x * a.x + a.x * b.x + b.x * b.x);
        m.both += area * (a.x * a.y + b.x * b.y + 0.5 * (a.x * b.y + b.x * a.y));
        m.across += area * (a.y * a.y + a.y * b.y + b.y * b.y);
        a = b;
    }
    return m;
}

/* The larger singular value's square of two by two numbers, by the sum of their
   squares and the determinant. */
static double larger_square(double squares, double determinant)
{
    const double twice = 2 * fabs(determinant);
    return 0.5 * (squares + sqrt((squares + twice) * fmax(squares - twice, 0)));
}

/* The ellipse whose moments are in the same proportion, but no slimmer than the slack. */
void rampwise_outline_ellipse_(const outline *o, double slack, ellipse *e)
{
    *e = (ellipse){{{1e300, 0}, {0, 1e300}}, 0, 0, 0, 0}; /* nothing but zero is inside */
    if (!(o->largest > 0))
        return;
    const point far = o->corner[far_corner(o)];
    const double square = dot(far, far);
    const point along = {far.x / square, far.y / square}, across = {-along.y, along.x};
    const moments m = moments_of(o, along, across);
    const double tilt = m.along > 0 ? m.both / m.along : 0,
                 slim = m.along > 0 ? m.across / m.along - tilt * tilt : 0;
    const double width = slim > slack * slack ? sqrt(slim) : slack;
    e->form[0] = along;
    e->form[1] = (point){(across.x - tilt * along.x) / width, (across.y - tilt * along.y) / width};
    e->length = o->largest;
    e->determinant = 1 / width;
    e->longest = width * sqrt(larger_square(1 + (1 + tilt * tilt) / (width * width), 1 / width));
    rampwise_outline_inscribe_(o, slack, e);
}

/* The least over all edges of how far the edge, moved out by the slack, is from the origin, by how far the
   ellipse of size 1 reaches in that direction. Between the directions of two edges that are no more than a
   right angle apart, S of the ellipse is then beyond S of their corner by sqrt(2) of the slack at most. They
   are more apart only at the farthest corner a (at another one, c, the sides to a and -a meet at a right
   angle or more, by Thales, as |c| <= |a|), and there the line across a is between them, which an ellipse of
   half axes up to |a| does not pass. */
void rampwise_outline_inscribe_(const outline *o, double slack, ellipse *e)
{
    if (e->length == 0)
        return;
    const double scale = e->determinant / (e->length * e->length), moved = slack * o->largest;
    const double most = o->largest / (e->length * e->longest);
    double least = most * most;
    point v = opposite(o->corner[o->count - 1]);
    for (size_t i = 0; i < o->count; ++i) {
        const point next = o->corner[i], edge = minus(next, v);
        const double far = (cross(v, edge) + moved * larger(fabs(edge.x), fabs(edge.y))) * scale;
        const double along = dot(e->form[0], edge), across = dot(e->form[1], edge);
        const double reach = along * along + across * across;
        if (!(far > 0))
            least = 0;
        else if (far * far < least * reach)
            least = far * far / reach;
        v = next;
    }
    e->size = sqrt(least);
}

double rampwise_ellipse_larger_(const ellipse *e, const ellipse *other)
{
    const double area = cross(e->form[0], e->form[1]);
    double squares = 0;
    for (int i = 0; i < 4; ++i) {
        const double part = cross(e->form[i % 2], other->form[i / 2]) / area;
        squares += part * part;
    }
    return larger_square(squares, cross(other->form[0], other->form[1]) / area);
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

/* How far from the corner, towards one end of an arc where S is s, S is above the level; negative
   where the end is not on the `side` of the corner that it should be, so that both sides together
   leave what is between the ends. */
static double angle_above(const arc *a, point end, double s, int side, double level, double *rate)
{
    if (s >= level)
        return side * fabs(turn(a->corner, end));
    *rate += side / sqrt((a->size - level) * (a->size + level));
    return side * acos(level / a->size);
}

/* The part of an arc where S = size cos(phi - the corner's angle) is above the level. */
static double part_above(const arc *a, double level, double *rate)
{
    const int before = cross(a->begin, a->corner) >= 0 ? 1 : -1,
              after = cross(a->corner, a->end) >= 0 ? 1 : -1;
    return angle_above(a, a->begin, a->s_begin, before, level, rate) +
           angle_above(a, a->end, a->s_end, after, level, rate);
}

/* The measure of the angles where S is above the level, and how fast that falls as the level rises. Whole
   arcs in a row are one turn. */
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

/* Each line is x cos phi + y sin phi = S(phi); neighbours meet in a corner, which is
   the farthest between them. */
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
