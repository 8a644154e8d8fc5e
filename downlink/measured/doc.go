// Package measured takes what a receiver logged during passes, puts it over the
// prediction and estimates what explains the difference.
//
// Read reads a table in CSV or a CCSDS Tracking Data Message (503.0-B, KVN and XML).
// Over evaluates the prediction at the instants of the samples. FitLevel and
// FitFrequency fit offsets robustly, with errors of one standard deviation that heed
// the correlation of neighbouring samples; Rank weighs candidate orbits against a
// frequency log.
//
// Left out: ranging, two-way Doppler, integrated Doppler (DOPPLER_INTEGRATED is kept as
// not used). Times are UTC.
//
// Sources: CCSDS 503.0-B-2 (keywords and units); Huber, Robust Statistics, 1981 (weights
// and scale); Kass and Raftery, J. Am. Stat. Assoc. 90, 1995 (marginal likelihoods).
package measured
