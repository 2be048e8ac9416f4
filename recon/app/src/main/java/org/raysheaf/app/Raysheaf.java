package org.raysheaf.app;

import java.util.Objects;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;

/** The command that holds all verbs. It does nothing itself but say what it can do. */
@Command(
        name = "raysheaf",
        description = "Quantitative 3-D activity from lists of gamma events, without binning.",
        mixinStandardHelpOptions = true,
        versionProvider = Raysheaf.Version.class)
public final class Raysheaf implements Runnable {

    @Spec
    private CommandSpec spec;

    /** A command without a verb. */
    Raysheaf() {}

    /**
     * Runs a verb and ends the process with its exit code: 0, 1 (a problem in data or files) or 2 (usage).
     *
     * @param arguments the verb, its options and files
     */
    public static void main(String[] arguments) {
        System.exit(commandLine().execute(arguments));
    }

    /**
     * Builds the parser with all verbs.
     *
     * @return a new parser, to be used by one thread
     */
    static CommandLine commandLine() {
        return new CommandLine(new Raysheaf());
    }

    @Override
    public void run() {
        throw new CommandLine.ParameterException(spec.commandLine(), "Which verb? See --help.");
    }

    /** Reads the version from the jar that this class came in. */
    static final class Version implements CommandLine.IVersionProvider {

        Version() {}

        @Override
        public String[] getVersion() {
            String packaged = Raysheaf.class.getPackage().getImplementationVersion();
            return new String[] {"raysheaf " + Objects.requireNonNullElse(packaged, "(not packaged)")};
        }
    }
}
