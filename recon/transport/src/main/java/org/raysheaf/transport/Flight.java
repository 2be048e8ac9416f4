package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;
import org.raysheaf.geometry.detector.RayPath;
import org.raysheaf.geometry.matter.KleinNishina;

/**
 * Follows photons through the world until they are absorbed or gone, and notes what they leave in crystals. The optical depth of the
 * next collision (attenuation times path, added up) is exponentially distributed with mean 1, and is used up piece by piece along the
 * ray: surroundings, the box around phantom and shields (delta tracking, see {@link World}), crystals. Not safe for use by several
 * threads.
 */
final class Flight {
    /** Beyond this many scatterings of one photon, it is let go: a photon that had so many has lost its energy long before. */
    private static final int MOST_LEGS = 1000;

    private final World world;
    private final UniformRandomProvider random;
    private final ZigguratSampler.Exponential exponential;
    private final ComptonScatter compton;
    private final Deposits deposits;
    private final RayPath path = new RayPath();
    private final double[] box = new double[2];
    private final Photon pairA = new Photon();
    private final Photon pairB = new Photon();

    // The optical depth that is left, and where a collision happened: along the ray (mm), in what material and block
    // (−1: no crystal).
    private double depth;
    private double reached;
    private int material;
    private int element;

    Flight(World world, Deposits deposits, UniformRandomProvider random) {
        this.world = world;
        this.deposits = deposits;
        this.random = random;
        this.exponential = ZigguratSampler.Exponential.of(random);
        this.compton = new ComptonScatter(random);
    }

    /** Follows a photon; it is used up. */
    void follow(Photon photon) {
        for (int leg = 0; leg < MOST_LEGS && fly(photon); leg++) {
            photon.advance(reached);
            if (!collide(photon)) {
                return;
            }
        }
    }

    /** Flies to the next collision; false if there is none. */
    private boolean fly(Photon p) {
        depth = exponential.sample();
        boolean boxAhead = world.clipBox(p.x, p.y, p.z, p.dx, p.dy, p.dz, box);
        double at = 0;
        if (boxAhead && box[0] == 0 && world.boxIsApart()) {
            // Most photons start in the phantom: no crystal can be nearer than the end of its box.
            if (crossBox(p, 0, box[1])) {
                return true;
            }
            at = box[1];
            boxAhead = false;
        }
        world.system().trace(p.x, p.y, p.z, p.dx, p.dy, p.dz, path);
        for (int i = 0; i < path.size(); i++) {
            double enter = Math.max(path.enter(i), at);
            if (crossGap(p, at, enter, boxAhead)) {
                return true;
            }
            if (crossCrystal(p, i, enter)) {
                return true;
            }
            at = Math.max(enter, path.leave(i));
        }
        return boxAhead && box[1] > at && crossGap(p, at, box[1], true);
    }

    private boolean crossCrystal(Photon p, int segment, double enter) {
        int block = world.system().blockIndexOf(path.element(segment));
        double perMm = world.table(world.materialOf(block)).perMm(p.energyKeV);
        double length = path.leave(segment) - enter;
        double free = depth / perMm; // 0 in a perfect absorber: stopped at its surface
        if (free < length) {
            reached = enter + free;
            material = world.materialOf(block);
            element = path.element(segment);
            return true;
        }
        depth -= length * perMm;
        return false;
    }

    /** What lies between crystals: surroundings, and the box if it is still ahead. */
    private boolean crossGap(Photon p, double from, double to, boolean boxAhead) {
        if (!boxAhead || box[1] <= from || box[0] >= to) {
            return crossSurroundings(p, from, to);
        }
        double in = Math.max(from, box[0]);
        double out = Math.min(to, box[1]);
        return crossSurroundings(p, from, in) || crossBox(p, in, out) || crossSurroundings(p, out, to);
    }

    private boolean crossSurroundings(Photon p, double from, double to) {
        if (!(to > from)) {
            return false;
        }
        double perMm = world.table(world.surroundings()).perMm(p.energyKeV);
        double used = (to - from) * perMm;
        if (depth < used) {
            reached = from + depth / perMm;
            material = world.surroundings();
            element = -1;
            return true;
        }
        depth -= used;
        return false;
    }

    private boolean crossBox(Photon p, double from, double to) {
        double densest = world.densestPerMm(p.energyKeV);
        double at = from;
        while (true) {
            double free = depth / densest;
            if (!(at + free < to)) {
                depth -= (to - at) * densest;
                return false;
            }
            at += free;
            material = world.materialAt(p.x + at * p.dx, p.y + at * p.dy, p.z + at * p.dz);
            if (random.nextDouble() * densest < world.table(material).perMm(p.energyKeV)) {
                reached = at;
                element = -1;
                return true;
            }
            depth = exponential.sample();
        }
    }

    /** The collision itself; false if the photon ends there. */
    private boolean collide(Photon p) {
        PhotonTable table = world.table(material);
        double u = random.nextDouble();
        if (u < table.absorption(p.energyKeV)) {
            leave(p, p.energyKeV);
            return false;
        }
        if (u < table.absorptionOrCompton(p.energyKeV)) {
            compton.draw(p.energyKeV);
            leave(p, p.energyKeV - compton.keptKeV());
            p.energyKeV = compton.keptKeV();
            p.turn(compton.cosine(), random);
            p.countScatter(element);
            if (p.energyKeV < PhotonTable.LOWEST_KEV) {
                leave(p, p.energyKeV);
                return false;
            }
            return true;
        }
        // Below the threshold of pair production, and in shares rounded to single precision, the rest is not pairs.
        if (u < table.allButPair(p.energyKeV) || p.energyKeV <= 2 * KleinNishina.ELECTRON_KEV) {
            p.turn(world.coherent(material).drawCosine(p.energyKeV, random), random);
            p.countScatter(element);
            return true;
        }
        makePair(p);
        return false;
    }

    /** Pair production: the kinetic energy stays, and the positron's end gives two new photons. */
    private void makePair(Photon p) {
        leave(p, Math.max(0, p.energyKeV - 2 * KleinNishina.ELECTRON_KEV));
        p.source = Photon.OTHER;
        pairA.copy(p);
        pairB.copy(p);
        pairA.energyKeV = KleinNishina.ELECTRON_KEV;
        pairA.aimAnywhere(random);
        pairB.energyKeV = KleinNishina.ELECTRON_KEV;
        pairB.aimOpposite(pairA);
        // Neither can make a pair again, so these two are followed one after the other without another level.
        follow(pairA);
        follow(pairB);
    }

    private void leave(Photon p, double energyKeV) {
        if (element >= 0) {
            deposits.add(element, p, energyKeV);
        }
    }
}
