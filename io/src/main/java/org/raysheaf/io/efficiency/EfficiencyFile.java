package org.raysheaf.io.efficiency;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.raysheaf.io.file.Sha256;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.hdf5.StoredDataset;

/**
 * Efficiency of every element of a system, relative to the model: an HDF5 file with the root attributes {@code raysheaf} ("efficiency/1") and
 * {@code system_sha256}, and the datasets {@code efficiency} and {@code relative_error}, one number for each element; an element of efficiency 0
 * is silent and takes no part. Immutable.
 */
public final class EfficiencyFile {
    private static final String MARK = "raysheaf";
    private static final String VERSION = "efficiency/1";
    private static final String SYSTEM = "system_sha256";
    private static final String EFFICIENCY = "efficiency";
    private static final String ERROR = "relative_error";

    private final String place;
    private final String systemSha256;
    private final double[] efficiencies;
    private final double[] relativeErrors;

    private EfficiencyFile(String place, String systemSha256, double[] efficiencies, double[] relativeErrors) {
        this.place = place;
        this.systemSha256 = systemSha256;
        this.efficiencies = efficiencies;
        this.relativeErrors = relativeErrors;
    }

    /**
     * Writes a file.
     *
     * @param path where it is to appear
     * @param systemText text of the system description
     * @param efficiencies one for each element, at least 0; 0 for a silent one
     * @param relativeErrors relative standard error of each
     * @param replace whether a file that is already there may be replaced
     * @throws IOException if it cannot be written
     */
    public static void write(
            Path path, String systemText, double[] efficiencies, double[] relativeErrors, boolean replace)
            throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, replace)) {
            file.root().attribute(MARK, VERSION);
            file.root().attribute(SYSTEM, Sha256.ofText(systemText));
            file.root()
                    .array(EFFICIENCY, floats(efficiencies), efficiencies.length)
                    .attribute("unit", "1");
            file.root()
                    .array(ERROR, floats(relativeErrors), relativeErrors.length)
                    .attribute("unit", "1");
            file.commit();
        }
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
                    path.toString(), file.root().attributes().text(SYSTEM).orElse(""), efficiencies, errors);
        }
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
}
