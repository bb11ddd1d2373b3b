/* to[j][i] = from[i][j], four by four, for AVX and later */
#ifdef SINGLE_PRECISION
static inline void transpose_4_by_4(const float *from, size_t from_stride, float *to, size_t to_stride)
{
    __m128 a = _mm_loadu_ps(from), b = _mm_loadu_ps(from + from_stride);
    __m128 c = _mm_loadu_ps(from + 2 * from_stride), d = _mm_loadu_ps(from + 3 * from_stride);
    _MM_TRANSPOSE4_PS(a, b, c, d);
    _mm_storeu_ps(to, a);
    _mm_storeu_ps(to + to_stride, b);
    _mm_storeu_ps(to + 2 * to_stride, c);
    _mm_storeu_ps(to + 3 * to_stride, d);
}
#else
static inline void transpose_4_by_4(const double *from, size_t from_stride, double *to, size_t to_stride)
{
    const __m256d a = _mm256_loadu_pd(from), b = _mm256_loadu_pd(from + from_stride);
    const __m256d c = _mm256_loadu_pd(from + 2 * from_stride);
    const __m256d d = _mm256_loadu_pd(from + 3 * from_stride);
    const __m256d ab_low = _mm256_unpacklo_pd(a, b), ab_high = _mm256_unpackhi_pd(a, b);
    const __m256d cd_low = _mm256_unpacklo_pd(c, d), cd_high = _mm256_unpackhi_pd(c, d);
    _mm256_storeu_pd(to, _mm256_permute2f128_pd(ab_low, cd_low, 0x20));
    _mm256_storeu_pd(to + to_stride, _mm256_permute2f128_pd(ab_high, cd_high, 0x20));
    _mm256_storeu_pd(to + 2 * to_stride, _mm256_permute2f128_pd(ab_low, cd_low, 0x31));
    _mm256_storeu_pd(to + 3 * to_stride, _mm256_permute2f128_pd(ab_high, cd_high, 0x31));
}
#endif
