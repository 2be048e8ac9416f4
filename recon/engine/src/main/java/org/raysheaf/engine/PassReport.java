package org.raysheaf.engine;

/**
 * What one pass over the events did.
 *
 * @param number of the pass, from 1
 * @param logLikelihood Σ_e ln q_e − Σ_j s_j x_j at the image that the pass started from, up to terms that do not depend on the image
 *     (Σ ln c_e and the expected background). With more than one subset the image moves during the pass and each subset adds its part
 *     at the image that it found, so the value only shows the trend
 * @param expectedEvents Σ_j s_j x_j after the pass; without background equal to the events used, up to rounding
 * @param seconds how long the pass took by the clock
 */
public record PassReport(int number, double logLikelihood, double expectedEvents, double seconds) {}
