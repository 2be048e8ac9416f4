package org.raysheaf.transport;

import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.matter.PositronRange;

/**
 * What a decay sends out: the two photons of an annihilation, some way from the decay, and gamma rays from the decay itself. Not safe for
 * use by several threads.
 */
final class Emission {
    private static final double FWHM_PER_SD = 2 * Math.sqrt(2 * Math.log(2));

    /** Step in which a positron's way through several materials is added up (mm of path). */
    private static final double STEP_MM = 0.02;

    private final World world;
    private final Plan plan;
    private final UniformRandomProvider random;
    private final ZigguratSampler.NormalizedGaussian normal;
    private final Photon a = new Photon();
    private final Photon b = new Photon();
    private final double[] end = new double[3];

    /** What all decays have in common. */
    static final class Plan {
        final double positronsPerDecay;
        final double[] branchUpTo;
        final PositronRange[] ranges;
        final List<DecayScheme.GammaLine> gammas;
        final double angleSd;

        Plan(@Nullable DecayScheme scheme, Physics physics) {
            positronsPerDecay = scheme == null ? 1 : scheme.nuclide().positronBranching();
            List<DecayScheme.PositronBranch> branches =
                    scheme == null || !physics.positronRange() ? List.of() : scheme.positrons();
            branchUpTo = new double[branches.size()];
            ranges = new PositronRange[branches.size()];
            double sum = 0;
            for (int i = 0; i < ranges.length; i++) {
                sum += branches.get(i).share();
                branchUpTo[i] = sum;
                ranges[i] = PositronRange.of(branches.get(i).endpointKeV());
            }
            gammas = scheme == null || !physics.gammas() ? List.of() : scheme.gammas();
            angleSd = Math.toRadians(physics.acollinearityFwhmDeg()) / FWHM_PER_SD;
        }

        /** Photons per decay that come later and are in time with nothing. */
        double latePerDecay() {
            return gammas.stream()
                    .filter(line -> line.timing() == DecayScheme.Timing.LATER)
                    .mapToDouble(DecayScheme.GammaLine::perDecay)
                    .sum();
        }
    }

    Emission(World world, Plan plan, UniformRandomProvider random) {
        this.world = world;
        this.plan = plan;
        this.random = random;
        this.normal = ZigguratSampler.NormalizedGaussian.of(random);
    }

    /**
     * Lets a decay happen.
     *
     * @param point its place (mm); receives where its annihilation photons were emitted, if there are any
     * @param flight follows the photons
     * @return whether a positron was emitted
     */
    boolean decay(double[] point, Flight flight) {
        boolean positron = random.nextDouble() < plan.positronsPerDecay;
        double chance = 0;
        for (int i = 0; i < plan.gammas.size(); i++) {
            DecayScheme.GammaLine line = plan.gammas.get(i);
            chance += switch (line.timing()) {
                case TOGETHER -> line.perDecay();
                case WITHOUT_POSITRON -> positron ? 0 : line.perDecay() / (1 - plan.positronsPerDecay);
                case LATER -> 0;
            };
            // A line may stand twice, once with either timing; it is still one photon at most.
            boolean again = i + 1 < plan.gammas.size() && plan.gammas.get(i + 1).energyKeV() == line.energyKeV();
            if (again) {
                continue;
            }
            if (chance > 0 && random.nextDouble() < chance) {
                gamma(point, line.energyKeV(), flight);
            }
            chance = 0;
        }
        if (positron) {
            travel(point);
            annihilate(point, flight);
        }
        return positron;
    }

    /** Emits a gamma ray that comes later, one of those of the scheme. */
    void later(double[] point, Flight flight) {
        double u = random.nextDouble() * plan.latePerDecay();
        double keV = 0;
        for (DecayScheme.GammaLine line : plan.gammas) {
            if (line.timing() == DecayScheme.Timing.LATER && u >= 0) {
                keV = line.energyKeV();
                u -= line.perDecay();
            }
        }
        gamma(point, keV, flight);
    }

    /** Emits one gamma ray in any direction. */
    void gamma(double[] point, double keV, Flight flight) {
        a.emit(point, keV, Photon.OTHER);
        a.aimAnywhere(random);
        flight.follow(a);
    }

    private void annihilate(double[] point, Flight flight) {
        a.emit(point, KleinNishina.ELECTRON_KEV, Photon.ANNIHILATION);
        b.emit(point, KleinNishina.ELECTRON_KEV, Photon.ANNIHILATION);
        a.aimAnywhere(random);
        b.aimOpposite(a);
        if (plan.angleSd > 0) {
            double u = plan.angleSd * normal.sample();
            double v = plan.angleSd * normal.sample();
            double angle = Math.hypot(u, v);
            if (angle > 0) {
                double scale = Math.sin(angle) / angle;
                b.tilt(u * scale, v * scale, Math.cos(angle));
            }
        }
        flight.follow(a);
        flight.follow(b);
    }

    /**
     * Moves a point by the range of a positron: a straight way along which the density adds up to the distance drawn in water. A positron that
     * leaves the box around all matter stops there.
     */
    private void travel(double[] point) {
        if (plan.ranges.length == 0) {
            return;
        }
        int branch = 0;
        if (plan.ranges.length > 1) {
            double u = random.nextDouble();
            while (branch < plan.ranges.length - 1 && u >= plan.branchUpTo[branch]) {
                branch++;
            }
        }
        double water = plan.ranges[branch].drawMm(random);
        a.aimAnywhere(random);
        int here = world.materialAt(point[0], point[1], point[2]);
        double straight = water / world.table(here).density();
        if (!move(point, straight) || !samePlace(point, here, straight)) {
            stepwise(point, water);
            return;
        }
        System.arraycopy(end, 0, point, 0, 3);
    }

    /** Computes where a way from a point ends; false if that is outside the box. */
    private boolean move(double[] point, double lengthMm) {
        end[0] = point[0] + lengthMm * a.dx;
        end[1] = point[1] + lengthMm * a.dy;
        end[2] = point[2] + lengthMm * a.dz;
        return world.inBox(end[0], end[1], end[2]);
    }

    /** Whether a way runs in one material, as far as its middle and its end tell. */
    private boolean samePlace(double[] point, int here, double lengthMm) {
        return world.materialAt(end[0], end[1], end[2]) == here
                && world.materialAt(
                                point[0] + 0.5 * lengthMm * a.dx,
                                point[1] + 0.5 * lengthMm * a.dy,
                                point[2] + 0.5 * lengthMm * a.dz)
                        == here;
    }

    private void stepwise(double[] point, double water) {
        double left = water;
        while (left > 0) {
            double density =
                    world.table(world.materialAt(point[0], point[1], point[2])).density();
            double step = density > 0 ? Math.min(STEP_MM, left / density) : STEP_MM;
            if (!move(point, step)) {
                return;
            }
            System.arraycopy(end, 0, point, 0, 3);
            left -= step * density;
        }
    }
}
