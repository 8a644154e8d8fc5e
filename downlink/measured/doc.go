// Package measured takes what a receiver logged during passes, puts it over the
// prediction and estimates what explains the difference.
//
// Read reads a table in CSV or a CCSDS Tracking Data Message (503.0-B, KVN and XML).
// Over evaluates the prediction at the instants of the samples. FitLevel, FitNoise,
// FitFrequency and FitHorizon fit what explains the difference robustly, with intervals that
// heed the correlation of neighbouring samples and, from three passes on, how passes
// differ; Rank weighs candidate orbits against a frequency log.
//
// Two figures are of our own choice: parameters are called alike by singular values below those of
// a correlation of 0.95, and left out below those of 0.9995.
//
// Left out: ranging, two-way Doppler, integrated Doppler (DOPPLER_INTEGRATED is kept as
// not used). Times are UTC.
//
// Sources: CCSDS 503.0-B-2 (keywords and units); Huber, Robust Statistics, 1981 (weights
// and scale); Efron and Stein, Ann. Stat. 9, 1981 (jackknife over passes); Kass and Raftery, J. Am. Stat. Assoc. 90, 1995 (marginal likelihoods).
package measured
