/* Known answers for rampwise_self_test. The cases are ours; every answer is computed by MPFR
   (tests/property/known_answers.c, which prints this file's tables with the argument --print and
   checks them otherwise). */
#ifndef RAMPWISE_KNOWN_ANSWERS_H
#define RAMPWISE_KNOWN_ANSWERS_H

#include "rampwise/coefficients.h"

enum { KNOWN_SAMPLES = 40 };

/* Eighths between -4 and 4 */
static inline double known_sample(int i)
{
    return (i * 37 % 65 - 32) / 8.0;
}

typedef struct known_fused {
    double x, y, z, answer;
} known_fused;

typedef struct known_fusedf {
    float x, y, z, answer;
} known_fusedf;

/* coefficients: the first ten members of rampwise_coeffs. u, v and the total acceleration after all
   samples from u = 1/2, v = -1/4. single: u, v and their low words after the same in single precision. */
typedef struct known_response {
    rampwise_system system;
    double dt;
    int input, between;
    double coefficients[10], u, v, total;
    float single[4];
} known_response;

/* A product's tail that decides a tie, up and down; cancellation that leaves the tail alone; ties
   to even; a sum where rounding the product first, or rounding twice, is wrong; subnormal answers;
   the largest number. */
static const known_fused known_fuseds[] = {
    {0x1.0000000000001p+0, 0x1.0000000000001p+0, -0x1.0000000000002p+0, 0x1p-104},
    {0x1.0000000000001p+0, 0x1.ffffffffffffep-1, -0x1p+0, -0x1p-104},
    {0x1.8p+0, 0x1.5555555555555p-2, -0x1p-1, -0x1p-55},
    {0x1.0000000000001p+0, 0x1.8p-1, 0x1p+53, 0x1p+53},
    {0x1.0000000000001p+0, -0x1.8p-1, 0x1p+53, 0x1.fffffffffffffp+52},
    {0x1p+0, 0x1p+0, 0x1p+53, 0x1p+53},
    {0x1p+0, 0x1p+0, 0x1.0000000000001p+53, 0x1.0000000000002p+53},
    {0x1.0000000000001p+0, 0x1p-53, 0x1p+0, 0x1.0000000000001p+0},
    {0x1p+0, 0x1p-53, 0x1p+0, 0x1p+0},
    {0x1.fffffffffffffp+0, 0x1.fffffffffffffp+0, 0x1p-60, 0x1.ffffffffffffep+1},
    {0x1p-600, 0x1p-474, 0x0p+0, 0x0.0000000000001p-1022},
    {0x1.8p-537, 0x1.8p-537, 0x0.0000000000002p-1022, 0x0.0000000000004p-1022},
    {-0x1.8p-538, 0x1.8p-537, 0x0.0000000000002p-1022, 0x0.0000000000001p-1022},
    {0x1.0000000000001p-511, 0x1p-511, -0x1p-1022, 0x0.0000000000001p-1022},
    {0x1.5555555555555p-520, 0x1.5555555555555p-530, 0x0.0000000004p-1022, 0x0.0000001c75c72p-1022},
    {0x1.fffffffffffffp+1023, 0x1p+1, -0x1.fffffffffffffp+1023, 0x1.fffffffffffffp+1023},
    {0x1.fffffffffffffp+600, -0x1p+423, 0x1.fffffffffffffp+1023, 0x0p+0},
    {-0x1p-600, 0x1p-600, 0x0p+0, -0x0p+0},
    {0x1.8p+1, 0x1.4p+2, -0x1.ep+3, 0x0p+0},
    {0x1.921fb54442d18p+1, 0x1.5bf0a8b145769p+1, -0x1.114580b45d475p+3, -0x1.a6187b6d65928p-50},
};

static const known_fusedf known_fusedfs[] = {
    {0x1.000002p+0f, 0x1.000002p+0f, -0x1.000004p+0f, 0x1p-46f},
    {0x1.000002p+0f, 0x1.8p-1f, 0x1p+24f, 0x1p+24f},
    {0x1p+0f, 0x1p-24f, 0x1p+0f, 0x1p+0f},
    {0x1.000002p+0f, 0x1p-24f, 0x1p+0f, 0x1.000002p+0f},
    {0x1.8p-75f, 0x1.8p-75f, 0x1p-149f, 0x1p-148f},
    {0x1.5b4p-70f, 0x1.2p-72f, 0x1p-140f, 0x1.618p-140f},
    {0x1.fffffep+127f, 0x1p+1f, -0x1.fffffep+127f, 0x1.fffffep+127f},
    {0x1.000002p+0f, 0x1.000002p-30f, 0x1p+0f, 0x1p+0f},
    {0x1.fffffep+11f, 0x1.fffffep+11f, 0x1p-40f, 0x1.fffffcp+23f},
    {0x1p-1f, 0x1.000002p-23f, 0x1p+0f, 0x1.000002p+0f},
    {0x1.00001p+0f, 0x1p+0f, 0x1p-60f, 0x1.00001p+0f},
    {0x1.000002p+0f, 0x1.fffffcp-25f, 0x1.000002p+0f, 0x1.000002p+0f},
};

static const known_response known_responses[] = {
    {{0x1p+0, 0x1p-1, 0x1.2p+5},
     0x1.47ae147ae147bp-7,
     RAMPWISE_FORCE,
     RAMPWISE_RAMP,
     {0x1.ff1488a41a125p-1, 0x1.46aa8454b8d11p-7, 0x1.16ff095372475p-15, 0x1.1738896e2fbbdp-16,
      -0x1.6f7fd4df4feb3p-2, 0x1.fc87339b70a0bp-1, 0x1.464bb3b135b51p-8, 0x1.470954f83bed1p-8,
      -0x1.d6eeb7cbdb69ep-10, -0x1.bc663247afab9p-8},
     -0x1.45774738655d8p-2,
     -0x1.c9cb276fad469p+0,
     0x1.3ec2e2966cddap+3,
     {-0x1.457746p-2f, -0x1.c9cb28p+0f, -0x1p-27f, -0x1.cp-25f}},
    {{0x1.4p+1, 0x1p-3, 0x1.0624dd2f1a9fcp-10},
     0x1.0624dd2f1a9fcp-10,
     RAMPWISE_FORCE,
     RAMPWISE_HOLD,
     {0x1.fffffffe4833ep-1, 0x1.06232fb17b039p-10, 0x1.ad7d548d10508p-23, 0x0p+0, -0x1.ad7c69fe54668p-22,
      0x1.fff972504a2a7p-1, 0x1.a36b7f825e6c2p-12, 0x0p+0, -0x1.b7cc1d3c7b33cp-33, -0x1.a36bed7565bb4p-15},
     0x1.f60c41be4a61p-2,
     -0x1.fb06e9e512379p-3,
     -0x1.e0299e5179b85p-1,
     {0x1.f60c42p-2f, -0x1.fb06eap-3f, -0x1.e4p-29f, 0x1.4p-31f}},
    {{0x1p+0, 0x1.8p+3, 0x1.2p+5},
     0x1p-2,
     RAMPWISE_BASE_ACCELERATION,
     RAMPWISE_RAMP,
     {0x1.1d9b4a76f1992p-1, 0x1.c8f87724b5c1dp-5, -0x1.cffa71e706149p-8, -0x1.54f9daaaf43cbp-8,
      -0x1.010bc304a63d1p+1, -0x1.c8f87724b5c1dp-4, -0x1.b3f286ddc4c9bp-8, -0x1.927a2648fd28ap-5,
      -0x1.c4c96b121ccdbp-2, -0x1.1c8f87724b5c2p+0},
     0x1.33284ab19ba36p-6,
     0x1.b05f0ebc6e54cp-5,
     -0x1.4eea4f8a90ebbp+0,
     {0x1.332848p-6f, 0x1.b05f1p-5f, 0x1p-30f, 0x0p+0f}},
    {{0x1.8p+1, 0x0p+0, 0x1.f4p+9},
     0x1p-1,
     RAMPWISE_BASE_ACCELERATION,
     RAMPWISE_HOLD,
     {-0x1.e9b92c928c40bp-1, 0x1.05d2f676493f2p-6, -0x1.80a9692e08cd1p-8, 0x0p+0, -0x1.54eab0ea04b4ep+2,
      -0x1.e9b92c928c40bp-1, -0x1.05d2f676493f2p-6, 0x0p+0, -0x1.f4dc964946206p+0, -0x1.f4dc964946206p+0},
     -0x1.a8e47856f4f12p-3,
     0x1.b92480d5cdffcp+2,
     0x1.149f69034777ap+6,
     {-0x1.a8e45p-3f, 0x1.b92474p+2f, 0x0p+0f, 0x0p+0f}},
    {{0x1.8p-1, 0x1.4p+5, 0x1.2p+5},
     0x1p-3,
     RAMPWISE_BASE_VELOCITY,
     RAMPWISE_RAMP,
     {0x1.d0babf505fbbep-1, 0x1.1b434cd904014p-6, 0x1.f8380751582bbp-7, -0x1.f8380751582bbp-7,
      -0x1.a8e4f3458601dp-1, -0x1.d805865466ddcp-7, 0x1.1b434cd904014p-3, -0x1.1b434cd904014p-3,
      -0x1.7a2a057d0220cp-4, -0x1.03b00b0ca8cdcp+0},
     0x1.44c1047ed14aap-5,
     0x1.fc02600d19d2ep-2,
     -0x1.c5c96876ce797p+4,
     {0x1.44c104p-5f, 0x1.fc026p-2f, 0x0p+0f, 0x0p+0f}},
    {{0x1.f4p+9, 0x1.9p+6, 0x1.e848p+17},
     0x1.0624dd2f1a9fcp-8,
     RAMPWISE_BASE_DISPLACEMENT,
     RAMPWISE_RAMP,
     {0x1.fef9fa722e014p-1, 0x1.05eab900a2011p-8, 0x1.28edc61cd1843p-10, 0x1.c63aab0e57e42p-11,
      -0x1.ff8e71553c6a1p-1, 0x1.fec5984d2de0ep-1, 0x1.990a596814063p-2, 0x1.330944a13266fp-1,
      -0x1.06058dd1febb2p-9, -0x1.3a67b2d21f21cp-9},
     0x1.adf8b0112fed8p-5,
     -0x1.25cdc96766e5dp+2,
     -0x1.5af4d0ade1a83p+9,
     {0x1.adf8b8p-5f, -0x1.25cdc8p+2f, -0x1p-30f, -0x1p-23f}},
    {{0x1p+0, 0x0p+0, 0x1.2p+3},
     0x1.999999999999ap-4,
     RAMPWISE_BASE_DISPLACEMENT,
     RAMPWISE_HOLD,
     {0x1.e921dd42f09bap-1, 0x1.937bcc7a3a2fp-4, 0x1.6de22bd0f645bp-5, 0x0p+0, -0x1.c5eb46098174ep-1,
      0x1.e921dd42f09bap-1, 0x1.c5eb46098174ep-1, 0x0p+0, -0x1.6de22bd0f645bp-5, -0x1.6de22bd0f645bp-5},
     0x1.e9e62229958c6p+0,
     -0x1.b914db3d3ef04p+1,
     -0x1.34c8b99bb20f8p+5,
     {0x1.e9e62p+0f, -0x1.b914dp+1f, 0x1p-24f, -0x1p-23f}},
    {{0x1p+1, 0x0p+0, 0x0p+0},
     0x1.999999999999ap-5,
     RAMPWISE_FORCE,
     RAMPWISE_RAMP,
     {0x1p+0, 0x1.999999999999ap-5, 0x1.b4e81b4e81b4fp-12, 0x1.b4e81b4e81b4fp-13, 0x0p+0, 0x1p+0,
      0x1.999999999999ap-7, 0x1.999999999999ap-7, 0x0p+0, 0x0p+0},
     0x1.7392c5f92c5f5p-3,
     -0x1.b999999999998p-4,
     -0x1.3p+0,
     {0x1.7392c8p-3f, -0x1.b99998p-4f, -0x1.2p-28f, 0x1.8p-29f}},
    {{0x1p+0, 0x1p-2, -0x1p+2},
     0x1.999999999999ap-4,
     RAMPWISE_FORCE,
     RAMPWISE_RAMP,
     {0x1.05183259511fp+0, 0x1.97397e98528d9p-4, 0x1.b291e12569967p-9, 0x1.b30e97064bce8p-10,
      0x1.97397e98528d9p-2, 0x1.fd7698bddfa99p-1, 0x1.96e341474b6c9p-5, 0x1.978fbbe959ae8p-5,
      0x1.460c965447bedp-6, -0x1.44b3a1102b3acp-8},
     0x1.0a5a9b3c4b33ap+8,
     0x1.f45792fadda56p+8,
     0x1.d4fa44193ab29p+9,
     {0x1.0a5a98p+8f, 0x1.f4578ep+8f, 0x1p-16f, 0x1p-17f}},
    {{0x1p+0, 0x1p-4, 0x1.0c6f7a0b5ed8dp-20},
     0x1.0624dd2f1a9fcp-10,
     RAMPWISE_BASE_ACCELERATION,
     RAMPWISE_RAMP,
     {0x1.fffffffffee68p-1, 0x1.0622c4530358p-10, -0x1.65e7d250046dcp-22, -0x1.65e8898f5746dp-23,
      -0x1.12de8b923dab6p-30, 0x1.fff7cee9dc4e7p-1, -0x1.0622115f75b7bp-11, -0x1.0623774690f86p-11,
      -0x1.197817c5c57a9p-41, -0x1.0622c476325bp-14},
     0x1.f5e3cd01470e3p-2,
     -0x1.05312fc5c95bcp-2,
     0x1.052f2180c1b3bp-6,
     {0x1.f5e3cep-2f, -0x1.05313p-2f, -0x1.fbp-27f, 0x1.2cp-28f}},
};

#endif
