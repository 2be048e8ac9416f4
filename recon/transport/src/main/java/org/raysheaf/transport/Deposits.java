package org.raysheaf.transport;

import java.util.Arrays;

/** What the photons of one decay leave in crystals, in the order in which it happened photon by photon. Not safe for use by several threads. */
final class Deposits {
    private int size;
    int[] element = new int[16];
    double[] x = new double[16];
    double[] y = new double[16];
    double[] z = new double[16];
    double[] agePs = new double[16];
    double[] energyKeV = new double[16];
    byte[] source = new byte[16];
    int[] objectScatters = new int[16];
    int[] detectorScatters = new int[16];

    void clear() {
        size = 0;
    }

    int size() {
        return size;
    }

    void add(int crystal, Photon p, double keV) {
        if (size == element.length) {
            grow();
        }
        element[size] = crystal;
        x[size] = p.x;
        y[size] = p.y;
        z[size] = p.z;
        agePs[size] = p.agePs;
        energyKeV[size] = keV;
        source[size] = p.source;
        objectScatters[size] = p.objectScatters;
        detectorScatters[size] = p.detectorScatters;
        size++;
    }

    private void grow() {
        int room = 2 * size;
        element = Arrays.copyOf(element, room);
        x = Arrays.copyOf(x, room);
        y = Arrays.copyOf(y, room);
        z = Arrays.copyOf(z, room);
        agePs = Arrays.copyOf(agePs, room);
        energyKeV = Arrays.copyOf(energyKeV, room);
        source = Arrays.copyOf(source, room);
        objectScatters = Arrays.copyOf(objectScatters, room);
        detectorScatters = Arrays.copyOf(detectorScatters, room);
    }
}
