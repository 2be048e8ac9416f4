package org.raysheaf.geometry.matter;

/** What can happen to a photon. */
public enum Interaction {
    /** Coherent (Rayleigh) scatter: a change of direction, no loss of energy. */
    COHERENT,
    /** Incoherent (Compton) scatter, with the binding of electrons as tabulated. */
    COMPTON,
    /** Photoelectric absorption. */
    PHOTOELECTRIC,
    /** Pair production, in the field of nuclei and of electrons together; from 1022 keV on. */
    PAIR
}
