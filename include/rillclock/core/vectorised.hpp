#pragma once

/// Marks a function whose loops are to be compiled for vector units: one copy for each of several instruction sets,
/// chosen when the program starts. All copies do the same operations in the same order on each cell, so they give the
/// same bits; where the macro is empty (other compilers, sanitizers) the plain function is all there is.
///
/// Floating-point traps are not used, and only when gcc 12 is told so does it vectorise a comparison that selects.
#if defined(__GNUC__) && !defined(__clang__) && defined(__x86_64__) && defined(__OPTIMIZE__) && \
    !defined(__SANITIZE_ADDRESS__) && !defined(__SANITIZE_THREAD__)
#define RILLCLOCK_VECTORISED \
    __attribute__((target_clones("default", "avx2", "arch=skylake-avx512"), optimize("O3", "no-trapping-math")))
#else
#define RILLCLOCK_VECTORISED
#endif
