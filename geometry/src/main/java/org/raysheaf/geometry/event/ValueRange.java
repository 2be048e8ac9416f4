package org.raysheaf.geometry.event;

/** Which values of an attribute can be. Real numbers are always finite. */
public enum ValueRange {
    /** 0 or 1. */
    FLAG,
    /** 0 to 255. */
    COUNT,
    /** An element of the detector system. */
    ELEMENT,
    /** At least 0. */
    NOT_NEGATIVE,
    /** Any number. */
    ANY
}
