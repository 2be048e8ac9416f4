package org.raysheaf.geometry.sheaf;

/**
 * A run of sheaves in flat arrays, all with the same number of rays. A ray is a segment: six floats, start x y z and end x y z (mm).
 *
 * <p>Rays of sheaf i are i · raysPerSheaf to (i + 1) · raysPerSheaf − 1; the coordinates of ray k begin at 6 k. All rays have the same
 * {@link WeightLaw} h(t) for the weight along them. What the weight of a ray as a whole means depends on where the sheaf comes from:
 *
 * <ul>
 *   <li>from an event ({@link SheafMaker}): the share of the ray in the event; the weights of a sheaf sum to 1;
 *   <li>from a catalogue ({@link SheafCatalogue}): the étendue of the ray over 2π (mm²), so that activity f (Bq/mm³) gives the rate Σ
 *       weight · ∫ f dl (1/s).
 * </ul>
 *
 * <p>Arrays are shared, never copied. Not safe for use by several threads.
 */
public final class SheafBundle {
    private final int raysPerSheaf;
    private final int capacity;
    private final float[] rays;
    private final float[] weights;
    private final WeightLaw law;
    private final float[] centresMm;
    private final float[] sdsMm;
    private int size;

    /** The weight h(t) along a ray, t being the distance from its start (mm). */
    public enum WeightLaw {
        /** h = 1: a coincident pair without timing. */
        PLAIN,
        /** h is a normal density (1/mm) with a centre and a standard deviation of each ray's own: a pair with times of flight. */
        GAUSSIAN
    }

    /**
     * An empty bundle of plain rays.
     *
     * @param raysPerSheaf rays in every sheaf, at least 1
     * @param capacity the most sheaves it holds, at least 1
     */
    public SheafBundle(int raysPerSheaf, int capacity) {
        this(raysPerSheaf, capacity, WeightLaw.PLAIN);
    }

    /**
     * An empty bundle.
     *
     * @param raysPerSheaf rays in every sheaf, at least 1
     * @param capacity the most sheaves it holds, at least 1
     * @param law the weight along every ray
     */
    public SheafBundle(int raysPerSheaf, int capacity, WeightLaw law) {
        if (raysPerSheaf < 1 || capacity < 1) {
            throw new IllegalArgumentException(
                    "expected at least one ray and one sheaf: raysPerSheaf=" + raysPerSheaf + ", capacity=" + capacity);
        }
        this.raysPerSheaf = raysPerSheaf;
        this.capacity = capacity;
        this.rays = new float[Math.multiplyExact(6, Math.multiplyExact(raysPerSheaf, capacity))];
        this.weights = new float[raysPerSheaf * capacity];
        this.law = law;
        this.centresMm = new float[law == WeightLaw.PLAIN ? 0 : raysPerSheaf * capacity];
        this.sdsMm = new float[centresMm.length];
    }

    /**
     * The weight along every ray.
     *
     * @return the law
     */
    public WeightLaw law() {
        return law;
    }

    /**
     * Rays in every sheaf.
     *
     * @return the count, at least 1
     */
    public int raysPerSheaf() {
        return raysPerSheaf;
    }

    /**
     * The most sheaves that fit.
     *
     * @return the capacity
     */
    public int capacity() {
        return capacity;
    }

    /**
     * Sheaves in the bundle.
     *
     * @return the count
     */
    public int size() {
        return size;
    }

    /**
     * Whether another sheaf would not fit.
     *
     * @return true if size equals capacity
     */
    public boolean full() {
        return size == capacity;
    }

    /** Forgets all sheaves. */
    public void clear() {
        size = 0;
    }

    /**
     * Appends one more sheaf; the caller then fills its rays and weights.
     *
     * @return the index of the new sheaf
     */
    public int append() {
        if (full()) {
            throw new IllegalStateException("the bundle is full: capacity=" + capacity);
        }
        return size++;
    }

    /**
     * Sets one ray.
     *
     * @param ray sheaf · raysPerSheaf + index of the ray in its sheaf
     * @param x1 start (mm)
     * @param y1 start (mm)
     * @param z1 start (mm)
     * @param x2 end (mm)
     * @param y2 end (mm)
     * @param z2 end (mm)
     * @param weight weight of the ray, at least 0
     */
    public void set(int ray, double x1, double y1, double z1, double x2, double y2, double z2, double weight) {
        int at = 6 * ray;
        rays[at] = (float) x1;
        rays[at + 1] = (float) y1;
        rays[at + 2] = (float) z1;
        rays[at + 3] = (float) x2;
        rays[at + 4] = (float) y2;
        rays[at + 5] = (float) z2;
        weights[ray] = (float) weight;
    }

    /**
     * Sets where along a ray its weight lies, in a bundle of {@link WeightLaw#GAUSSIAN} rays.
     *
     * @param ray sheaf · raysPerSheaf + index of the ray in its sheaf
     * @param centreMm centre of the density, from the start of the ray towards its end (mm)
     * @param sdMm its standard deviation, above 0 (mm)
     */
    public void place(int ray, double centreMm, double sdMm) {
        centresMm[ray] = (float) centreMm;
        sdsMm[ray] = (float) sdMm;
    }

    /**
     * Centres of the density along all rays.
     *
     * @return the shared array, one per ray, from its start (mm); empty if rays are plain
     */
    public float[] centresMm() {
        return centresMm;
    }

    /**
     * Standard deviations of the density along all rays.
     *
     * @return the shared array, one per ray (mm); empty if rays are plain
     */
    public float[] sdsMm() {
        return sdsMm;
    }

    /**
     * Coordinates of all rays.
     *
     * @return the shared array, six per ray (mm)
     */
    public float[] rays() {
        return rays;
    }

    /**
     * Weights of all rays.
     *
     * @return the shared array, one per ray
     */
    public float[] weights() {
        return weights;
    }
}
