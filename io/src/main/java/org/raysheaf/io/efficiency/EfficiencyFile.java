package org.raysheaf.io.efficiency;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.raysheaf.io.file.Sha256;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.hdf5.StoredDataset;

/**
 * Efficiency of every element of a system, relative to the model: an HDF5 file with the root attributes {@code raysheaf} ("efficiency/1") and
 * {@code system_sha256}, and the datasets {@code efficiency} and {@code relative_error}, one number for each element; an element of efficiency 0
 * is silent and takes no part. Optional datasets {@code geometry_pair}, {@code geometry_column} and {@code geometry_row} hold the factors of block
 * geometry that go with the efficiencies. Immutable.
 */
public final class EfficiencyFile {
    private static final String MARK = "raysheaf";
    private static final String VERSION = "efficiency/1";
    private static final String SYSTEM = "system_sha256";
    private static final String EFFICIENCY = "efficiency";
    private static final String ERROR = "relative_error";
    private static final String PAIR = "geometry_pair";
    private static final String COLUMN = "geometry_column";
    private static final String ROW = "geometry_row";
    private static final String UNIT = "unit";
    private static final String ONE = "1";

    private final String place;
    private final String systemSha256;
    private final double[] efficiencies;
    private final double[] relativeErrors;
    private final Optional<Geometry> geometry;

    /** Factors of block geometry: of pairs of blocks, of columns and of rows, in the order of the system's kinds of pairs. Immutable. */
    public static final class Geometry {
        private final double[] pair;
        private final double[] column;
        private final double[] row;

        /**
         * Takes the factors.
         *
         * @param pair of pairs of blocks; copied, like the others
         * @param column of columns
         * @param row of rows
         */
        public Geometry(double[] pair, double[] column, double[] row) {
            this.pair = pair.clone();
            this.column = column.clone();
            this.row = row.clone();
        }

        /**
         * Factors of pairs of blocks.
         *
         * @return a copy
         */
        public double[] pair() {
            return pair.clone();
        }

        /**
         * Factors of columns.
         *
         * @return a copy
         */
        public double[] column() {
            return column.clone();
        }

        /**
         * Factors of rows.
         *
         * @return a copy
         */
        public double[] row() {
            return row.clone();
        }
    }

    private EfficiencyFile(
            String place,
            String systemSha256,
            double[] efficiencies,
            double[] relativeErrors,
            Optional<Geometry> geometry) {
        this.place = place;
        this.systemSha256 = systemSha256;
        this.efficiencies = efficiencies;
        this.relativeErrors = relativeErrors;
        this.geometry = geometry;
    }

    /**
     * Writes a file.
     *
     * @param path where it is to appear
     * @param systemText text of the system description
     * @param efficiencies one for each element, at least 0; 0 for a silent one
     * @param relativeErrors relative standard error of each
     * @param geometry factors of block geometry, or null
     * @param replace whether a file that is already there may be replaced
     * @throws IOException if it cannot be written
     */
    public static void write(
            Path path,
            String systemText,
            double[] efficiencies,
            double[] relativeErrors,
            @Nullable Geometry geometry,
            boolean replace)
            throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, replace)) {
            file.root().attribute(MARK, VERSION);
            file.root().attribute(SYSTEM, Sha256.ofText(systemText));
            put(file, EFFICIENCY, efficiencies);
            put(file, ERROR, relativeErrors);
            if (geometry != null) {
                put(file, PAIR, geometry.pair);
                put(file, COLUMN, geometry.column);
                put(file, ROW, geometry.row);
            }
            file.commit();
        }
    }

    private static void put(Hdf5Writer file, String name, double[] values) throws IOException {
        file.root().array(name, floats(values), values.length).attribute(UNIT, ONE);
    }

    private static float[] floats(double[] values) {
        float[] row = new float[values.length];
        for (int i = 0; i < row.length; i++) {
            row[i] = (float) values[i];
        }
        return row;
    }

    /**
     * Reads a file.
     *
     * @param path the file
     * @return what it holds
     * @throws IOException if it is none, or damaged
     */
    public static EfficiencyFile read(Path path) throws IOException {
        try (Hdf5File file = Hdf5File.open(path)) {
            String mark = file.root().attributes().text(MARK).orElse("nothing");
            if (!mark.equals(VERSION)) {
                throw new IOException(path + ": expected a file of efficiencies (raysheaf = \"" + VERSION
                        + "\"), found \"" + mark + "\"");
            }
            double[] efficiencies = column(file, path, EFFICIENCY);
            double[] errors = column(file, path, ERROR);
            if (errors.length != efficiencies.length) {
                throw new IOException(path + ": expected as many errors as efficiencies, " + efficiencies.length
                        + ", found " + errors.length);
            }
            for (int e = 0; e < efficiencies.length; e++) {
                if (!(efficiencies[e] >= 0 && efficiencies[e] < 1e6)) {
                    throw new IOException(path + ": expected efficiencies of at least 0, found " + efficiencies[e]
                            + " for element " + e);
                }
            }
            return new EfficiencyFile(
                    path.toString(),
                    file.root().attributes().text(SYSTEM).orElse(""),
                    efficiencies,
                    errors,
                    geometry(file, path));
        }
    }

    private static Optional<Geometry> geometry(Hdf5File file, Path path) throws IOException {
        if (file.root().dataset(PAIR).isEmpty()) {
            return Optional.empty();
        }
        return Optional.of(new Geometry(column(file, path, PAIR), column(file, path, COLUMN), column(file, path, ROW)));
    }

    private static double[] column(Hdf5File file, Path path, String name) throws IOException {
        Optional<StoredDataset> dataset = file.root().dataset(name);
        if (dataset.isEmpty()) {
            throw new IOException(path + ": expected a dataset " + name + ", found none");
        }
        float[] values = dataset.get().floats();
        double[] row = new double[values.length];
        for (int i = 0; i < row.length; i++) {
            row[i] = values[i];
        }
        return row;
    }

    /**
     * Refuses the file if it belongs to another system.
     *
     * @param systemText text of the system description in use
     * @param elements its number of elements
     * @throws IOException if the numbers of elements or the texts differ
     */
    public void requireSystem(String systemText, int elements) throws IOException {
        if (efficiencies.length != elements) {
            throw new IOException(place + ": expected efficiencies of " + elements + " elements, found "
                    + efficiencies.length + "; it belongs to another system, make one with: raysheaf normalize");
        }
        if (!systemSha256.isEmpty() && !systemSha256.equals(Sha256.ofText(systemText))) {
            throw new IOException(place + ": expected the efficiencies of the list's own system, found those of"
                    + " another description; make them again with: raysheaf normalize");
        }
    }

    /**
     * The efficiencies.
     *
     * @return one for each element; a copy
     */
    public double[] efficiencies() {
        return efficiencies.clone();
    }

    /**
     * Their errors.
     *
     * @return relative standard error of each; a copy
     */
    public double[] relativeErrors() {
        return relativeErrors.clone();
    }

    /**
     * Elements that take no part.
     *
     * @return their numbers
     */
    public List<Integer> silent() {
        List<Integer> silent = new ArrayList<>();
        for (int e = 0; e < efficiencies.length; e++) {
            if (efficiencies[e] == 0) {
                silent.add(e);
            }
        }
        return silent;
    }

    /**
     * Factors of block geometry.
     *
     * @return what the file holds of them, nothing if it was made without
     */
    public Optional<Geometry> geometry() {
        return geometry;
    }
}
