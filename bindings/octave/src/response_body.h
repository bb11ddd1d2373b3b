/* Responses to whole records, included once a precision. */

typedef struct PRECISION(whole) {
    size_t n, columns, systems;
    const REAL *p;
    const double *t; /* NULL for regular samples */
    const double *u0, *v0;
    int start;
    PRECISION(rampwise_coeffs) * c;
} PRECISION(whole);

/* Entry 0 is the state at the start; but by a ramp it is one step later. */
static int PRECISION(respond)(const PRECISION(whole) * w, size_t j, PRECISION(rampwise_history) h,
                              size_t *bad)
{
    const PRECISION(rampwise_coeffs) *const c = &w->c[w->systems > 1 ? j : 0];
    const REAL *const p = w->p + (w->columns > 1 ? j * w->n : 0);
    PRECISION(rampwise_state) s;
    *bad = 0;
    PRECISION(rampwise_start)(&s, (REAL)w->u0[j], (REAL)w->v0[j], w->start == BY_A_RAMP ? 0 : p[0]);
    if (w->start == BY_A_RAMP)
        return PRECISION(rampwise_run)(c, &s, w->n, p, &h, bad);
    int status = w->start == SETTLED ? PRECISION(rampwise_start_settled)(c, &s, p[0]) : RAMPWISE_OK;
    if (status == RAMPWISE_OK)
        status = PRECISION(rampwise_solve)(c, s.u, s.v, 1, p, &h, bad);
    if (status != RAMPWISE_OK)
        return status;
    const PRECISION(rampwise_history) after = {h.u ? h.u + 1 : NULL, h.v ? h.v + 1 : NULL,
                                               h.a ? h.a + 1 : NULL, h.total ? h.total + 1 : NULL};
    status = PRECISION(run_rest)(c, &s, w->n - 1, w->t, p + 1, &after, bad);
    *bad += status != RAMPWISE_OK;
    return status;
}

/* Displacement and velocity against the base, force of the spring and of the damper, as wanted, which follow from u and
   v. The index of one that overflows, or n. */
static size_t PRECISION(put_motions)(const PRECISION(whole) * w, size_t j, mxArray **out)
{
    static REAL (*const motion[])(const PRECISION(rampwise_coeffs) *, const PRECISION(rampwise_state) *) = {
        PRECISION(rampwise_relative_displacement), PRECISION(rampwise_relative_velocity),
        PRECISION(rampwise_spring_force), PRECISION(rampwise_damper_force)};
    const PRECISION(rampwise_coeffs) *const c = &w->c[w->systems > 1 ? j : 0];
    const REAL *const p = w->p + (w->columns > 1 ? j * w->n : 0);
    const REAL *const u = PRECISION(column)(out[2], w->n, j), *const v = PRECISION(column)(out[3], w->n, j);
    for (int k = 0; k < MOTIONS - HISTORIES; ++k) {
        REAL *const x = PRECISION(column)(out[6 + k], w->n, j);
        REAL before = w->start == BY_A_RAMP ? 0 : p[0];
        for (size_t i = 0; x != NULL && i < w->n; before = p[i++]) {
            /* over one dt the line of a step of any length */
            const double steps = w->t != NULL && i > 0 ? (w->t[i] - w->t[i - 1]) / (double)c->dt : 1;
            const REAL on_line = steps == 1 ? before : (REAL)(p[i] - (p[i] - before) / steps);
            x[i] = motion[k](
                c, &(PRECISION(rampwise_state)){.u = u[i], .v = v[i], .p = p[i], .p_before = on_line});
            if (!isfinite(x[i]))
                return i;
        }
    }
    return w->n;
}

/* The histories wanted; where any of put_motions is, u and v are answered too. */
static void PRECISION(make_room)(mxArray **out, const mxArray *wanted, size_t n, size_t wide)
{
    const double *const given = doubles(wanted, MOTIONS);
    mxArray *const all = matrix(MOTIONS, 1);
    for (int k = 0; k < MOTIONS; ++k) {
        if (given[k] != 0)
            mxGetPr(all)[k] = 1;
        if (given[k] != 0 && k >= HISTORIES)
            mxGetPr(all)[0] = mxGetPr(all)[1] = 1;
    }
    want_histories(out, all, MOTIONS, CLASS, n, wide);
}

void PRECISION(response)(mxArray **out, const mxArray **in)
{
    PRECISION(whole)
    w = {.n = mxGetM(in[7]),
         .columns = mxGetN(in[7]),
         .systems = count_systems(in[0]),
         .start = integer(in[4])};
    const size_t wide = w.systems > 1 ? w.systems : w.columns;
    (void)of_class(in[7], CLASS);
    if (w.n == 0 || w.systems == 0 || (w.columns > 1 ? w.columns : wide) != wide || w.columns == 0)
        refuse("systems and columns of samples must be as many, or one");
    w.u0 = doubles(in[5], wide);
    w.v0 = doubles(in[6], wide);
    w.p = mxGetData(in[7]);
    w.t = mxIsEmpty(in[9]) ? NULL : doubles(in[9], w.n);
    if (w.start < AT_ONCE || w.start > SETTLED ||
        (w.t != NULL && (w.start == BY_A_RAMP || CLASS != mxDOUBLE_CLASS)))
        refuse("no such start, or no times with it");
    w.c = PRECISION(make_coefficients)(out, in);
    if (w.c == NULL)
        return;
    answer(out, RAMPWISE_OK, 0);
    PRECISION(make_room)(out, in[8], w.n, wide);
    for (size_t j = 0; j < wide; ++j) {
        size_t bad;
        int status = PRECISION(respond)(&w, j, PRECISION(histories)(out, w.n, j), &bad);
        if (status == RAMPWISE_OK && (bad = PRECISION(put_motions)(&w, j, out)) < w.n)
            status = RAMPWISE_ERROR_OVERFLOW;
        if (status != RAMPWISE_OK) {
            answer(out, status, bad + 1 + (w.columns > 1 ? j * w.n : 0));
            return;
        }
    }
}
