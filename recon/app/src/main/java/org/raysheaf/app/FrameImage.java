package org.raysheaf.app;

import java.util.LinkedHashMap;
import java.util.Map;
import org.raysheaf.geometry.frame.Image;

/**
 * The image of a part of a list.
 *
 * @param frame which part
 * @param image activity concentration (Bq/mL) at the start of the whole list
 * @param events events that took part
 */
record FrameImage(Frame frame, Image image, long events) {
    double totalKBq() {
        return image.sum() * 1e-6 * image.grid().voxelVolumeMm3();
    }

    /** As result.json has it. */
    Map<String, Object> named() {
        Map<String, Object> named = new LinkedHashMap<>();
        named.put("name", frame.name());
        named.putAll(frame.where());
        named.put("events", events);
        named.put("total_kBq", totalKBq());
        named.put("total_standard_error_kBq", totalKBq() / Math.sqrt((double) Math.max(1, events)));
        return named;
    }
}
