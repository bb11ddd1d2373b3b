/* rampwise: exact response of spring-mass-damper systems to sampled loads.

   The headers are the reference manual, in the order in which data goes through them:

       system -> coefficients -> step -> record, channels, bank
              -> peaks, evidence, spectrum, directions, energy
              -> output, frequency, watch, stream (live data)
              -> structure, modes, equipment, combination (whole structures)

   A record in a few lines:

       rampwise_system sys;
       rampwise_coeffs c;
       rampwise_system_hertz(&sys, 2.5, 0.05);
       rampwise_coeffs_make(&c, &sys, 0.005, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
       rampwise_solve(&c, 0, 0, n, ground, &(rampwise_history){.u = u, .total = a}, NULL);

   Results support, and never replace, the governing code and a licensed engineer's judgement. */
#ifndef RAMPWISE_H
#define RAMPWISE_H

#include "rampwise/version.h"
#include "rampwise/status.h"
#include "rampwise/system.h"
#include "rampwise/coefficients.h"
#include "rampwise/fused.h"
#include "rampwise/step.h"
#include "rampwise/motion.h"
#include "rampwise/record.h"
#include "rampwise/channels.h"
#include "rampwise/instructions.h"
#include "rampwise/bank.h"
#include "rampwise/peak.h"
#include "rampwise/evidence.h"
#include "rampwise/peaks.h"
#include "rampwise/spectrum.h"
#include "rampwise/output.h"
#include "rampwise/frequency.h"
#include "rampwise/watch.h"
#include "rampwise/stream.h"
#include "rampwise/energy.h"
#include "rampwise/directions.h"
#include "rampwise/modes.h"
#include "rampwise/structure.h"
#include "rampwise/combination.h"
#include "rampwise/equipment.h"
#include "rampwise/foreign.h"

#endif
