package org.raysheaf.geometry.event;

import java.util.Arrays;
import java.util.EnumSet;
import java.util.Set;
import java.util.stream.Collectors;

/** What one record of a list stands for. */
public enum ListKind {
    /** One record per coincident pair of photons. */
    PAIRS("list", "a list of pairs"),
    /** One record per single photon; pairing turns them into pairs. */
    SINGLES("singles", "a list of singles");

    private final String word;
    private final String phrase;

    ListKind(String word, String phrase) {
        this.word = word;
        this.phrase = phrase;
    }

    /**
     * The kind of list that a set of columns makes.
     *
     * @param attributes the columns
     * @return {@link #SINGLES} if there is a column {@code element}, else {@link #PAIRS}
     */
    public static ListKind of(Set<Attribute> attributes) {
        return attributes.contains(Attribute.ELEMENT) ? SINGLES : PAIRS;
    }

    /**
     * How files name this kind, before the version.
     *
     * @return one word
     */
    public String word() {
        return word;
    }

    /**
     * How people are told of this kind.
     *
     * @return a short phrase
     */
    public String phrase() {
        return phrase;
    }

    /**
     * The columns without which it is none.
     *
     * @return a new set
     */
    public Set<Attribute> required() {
        return this == PAIRS
                ? EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B)
                : EnumSet.of(Attribute.ELEMENT, Attribute.TIME);
    }

    /**
     * Everything that a detector can measure of a record of this kind.
     *
     * @return a new set, without the truth that only a simulation knows
     */
    public Set<Attribute> measured() {
        return attributes(false);
    }

    /**
     * What a simulation knows of a record of this kind and no detector does.
     *
     * @return a new set
     */
    public Set<Attribute> truth() {
        return attributes(true);
    }

    private Set<Attribute> attributes(boolean truth) {
        return Arrays.stream(Attribute.values())
                .filter(attribute -> attribute.truth() == truth && attribute.belongsTo(this))
                .collect(Collectors.toCollection(() -> EnumSet.noneOf(Attribute.class)));
    }
}
