/* The body of printed.c for one precision. */
void MAKE(SET *x, REAL w, REAL z, REAL h)
{
    const REAL root = SQRT(1 - z * z), r = z / root, k = w * w;
    const REAL e = EXP(-z * w * h), s = SIN(w * root * h), c = COS(w * root * h);
    const REAL lag = 2 * z / (w * h), part = (1 - 2 * z * z) / (w * root * h);
    x->A = e * (r * s + c);
    x->B = e * s / (w * root);
    x->C = (lag + e * ((part - r) * s - (1 + lag) * c)) / k;
    x->D = (1 - lag + e * (lag * c - part * s)) / k;
    x->Ap = -e * w / root * s;
    x->Bp = e * (c - r * s);
    x->Cp = (-1 / h + e * ((w / root + r / h) * s + c / h)) / k;
    x->Dp = (1 - e * (r * s + c)) / (k * h);
}

void RUN(const SET *set, size_t n, const REAL *p, REAL *u_out)
{
    /* a copy, so that no store to u_out can be taken for one to it */
    const SET x = *set;
    REAL u = 0, v = 0, before = 0;
    for (size_t i = 0; i < n; ++i) {
        const REAL now = p[i], old = u;
        u = x.A * old + x.B * v + (x.C * before + x.D * now);
        v = x.Ap * old + x.Bp * v + (x.Cp * before + x.Dp * now);
        u_out[i] = u;
        before = now;
    }
}

#undef REAL
#undef SET
#undef MAKE
#undef RUN
#undef EXP
#undef SIN
#undef COS
#undef SQRT
