/* rampwise/linkage.h: how the functions of the library are declared.
   Every other header brings this one; nobody needs it alone. */
#ifndef RAMPWISE_LINKAGE_H
#define RAMPWISE_LINKAGE_H

#if defined(_WIN32) && defined(RAMPWISE_BUILDING)
#define RAMPWISE_API __declspec(dllexport)
#elif defined(__GNUC__)
#define RAMPWISE_API __attribute__((visibility("default")))
#else
#define RAMPWISE_API
#endif

#ifdef __cplusplus
#define RAMPWISE_BEGIN extern "C" {
#define RAMPWISE_END }
#else
#define RAMPWISE_BEGIN
#define RAMPWISE_END
#endif

#endif
