package org.raysheaf.app;

import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Image;

/**
 * Sensitivity of a system in each voxel: Σ étendue / 2π · factors · length (mm³).
 *
 * @param image the sensitivity
 * @param standardError its standard error (mm³), or null where it is a sum over all pairs
 * @param how where it comes from, for the report
 */
record SystemSensitivity(Image image, @Nullable Image standardError, Map<String, Object> how) {}
