package org.raysheaf.io.description;

import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * The line that says what a description describes, {@code raysheaf: kind/version}. It is read before and apart from the rest, so that a
 * file of another kind or from the future is named as such, whatever else it holds.
 */
final class FirstLine {
    /** The key of the first line. */
    static final String KEY = "raysheaf";

    /** The version that this program reads; every kind is still in its first. */
    static final int VERSION = 1;

    private static final Pattern FORM =
            Pattern.compile(KEY + ":\\s+([\"']?)([a-z][a-z_-]*)/([1-9][0-9]{0,8})\\1\\s*(?:#.*)?");

    private final String source;
    private final int line;
    private final String kind;
    private final int version;

    private FirstLine(String source, int line, String kind, int version) {
        this.source = source;
        this.line = line;
        this.kind = kind;
        this.version = version;
    }

    static FirstLine of(DescriptionText text) throws DescriptionException {
        int number = 0;
        for (String candidate : (Iterable<String>) text.text().lines()::iterator) {
            number++;
            if (isNothing(candidate)) {
                continue;
            }
            Matcher form = FORM.matcher(candidate);
            if (form.matches()) {
                return new FirstLine(text.source(), number, form.group(2), Integer.parseInt(form.group(3)));
            }
            throw new DescriptionException(
                    text.source(),
                    number,
                    0,
                    "expected a first line of the form \"" + KEY + ": system/1\", found \"" + Found.excerpt(candidate)
                            + "\"; this is no description of ours");
        }
        throw new DescriptionException(text.source(), "expected a description, found only comments");
    }

    private static boolean isNothing(String line) {
        String bare = line.strip();
        return bare.isEmpty() || bare.startsWith("#") || bare.equals("---");
    }

    String kind() {
        return kind;
    }

    void require(String expected) throws DescriptionException {
        if (!kind.equals(expected)) {
            throw new DescriptionException(
                    source,
                    line,
                    0,
                    "expected a description of kind " + expected + ", found one of kind " + kind
                            + "; name the right file");
        }
        if (version > VERSION) {
            throw new DescriptionException(
                    source,
                    line,
                    0,
                    "expected " + kind + "/" + VERSION + ", found " + kind + "/" + version
                            + "; the file is too new for this version of Raysheaf");
        }
    }
}
