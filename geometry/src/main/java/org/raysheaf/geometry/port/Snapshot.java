package org.raysheaf.geometry.port;

import java.util.Collections;
import java.util.SortedMap;
import java.util.TreeMap;

/**
 * All that a long computation needs to go on later: named arrays of single precision (images) and of double precision (figures). Arrays
 * are shared, so a snapshot holds good only until the computation goes on. Not safe for use by several threads.
 */
public final class Snapshot {
    private final SortedMap<String, float[]> images = new TreeMap<>();
    private final SortedMap<String, double[]> figures = new TreeMap<>();

    /** An empty snapshot. */
    public Snapshot() {}

    /**
     * Adds an array of single precision.
     *
     * @param name its name, unique among those of its kind
     * @param values the values; shared
     */
    public void put(String name, float[] values) {
        images.put(name, values);
    }

    /**
     * Adds numbers of double precision.
     *
     * @param name their name, unique among those of its kind
     * @param numbers the numbers; shared
     */
    public void put(String name, double... numbers) {
        figures.put(name, numbers);
    }

    /**
     * An array of single precision.
     *
     * @param name its name
     * @param length how many values it must have
     * @return the shared array
     * @throws IllegalArgumentException if there is none of that name and length: the snapshot is of something else
     */
    public float[] values(String name, int length) {
        float[] values = images.get(name);
        if (values == null || values.length != length) {
            throw new IllegalArgumentException("the checkpoint is of another computation: expected " + length
                    + " values \"" + name + "\", found " + (values == null ? "none" : values.length));
        }
        return values;
    }

    /**
     * Numbers of double precision.
     *
     * @param name their name
     * @return the shared array
     * @throws IllegalArgumentException if there is none of that name
     */
    public double[] numbers(String name) {
        double[] numbers = figures.get(name);
        if (numbers == null) {
            throw new IllegalArgumentException("the checkpoint is of another computation: it has no \"" + name + "\"");
        }
        return numbers;
    }

    /**
     * A single number.
     *
     * @param name its name
     * @return the number
     * @throws IllegalArgumentException if there is none of that name
     */
    public double number(String name) {
        return numbers(name)[0];
    }

    /**
     * All arrays of single precision.
     *
     * @return a view by name
     */
    public SortedMap<String, float[]> images() {
        return Collections.unmodifiableSortedMap(images);
    }

    /**
     * All numbers of double precision.
     *
     * @return a view by name
     */
    public SortedMap<String, double[]> figures() {
        return Collections.unmodifiableSortedMap(figures);
    }
}
