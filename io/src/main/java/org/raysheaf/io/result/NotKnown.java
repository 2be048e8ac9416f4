package org.raysheaf.io.result;

/**
 * Stands where a number should be but cannot be given; written as {@code {"value": null, "reason": "..."}}.
 *
 * @param reason why, in a few plain words
 */
public record NotKnown(String reason) {}
