package org.raysheaf.geometry.solid;

/**
 * A solid in its own frame, centred on the origin: plain settings that a description can hold. {@link Placed} puts it
 * somewhere else.
 */
public sealed interface Shape extends Solid permits Sphere, Ellipsoid, Cylinder, Cone, Box {}
