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
        versionProvider = Raysheaf.Version.class,
        footer = {"", Common.CAUTION},
        subcommands = {
            CheckVerb.class,
            ImportVerb.class,
            CalibrateVerb.class,
            SimulateVerb.class,
            PairVerb.class,
            NormalizeVerb.class,
            SensitivityVerb.class,
            ReconstructVerb.class,
            LinesVerb.class,
            DemoVerb.class
        })
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
        System.setProperty("java.awt.headless", "true");
        System.exit(commandLine().execute(arguments));
    }

    /**
     * Builds the parser with all verbs.
     *
     * @return a new parser, to be used by one thread
     */
    static CommandLine commandLine() {
        Failures failures = new Failures();
        CommandLine line = new CommandLine(new Raysheaf())
                .setExecutionExceptionHandler(failures)
                .setParameterExceptionHandler(failures);
        for (CommandLine verb : line.getSubcommands().values()) {
            verb.getCommandSpec().mixinStandardHelpOptions(true).versionProvider(new Version());
            verb.getCommandSpec().usageMessage().footer("", Common.CAUTION).sortOptions(false);
        }
        return line;
    }

    @Override
    public void run() {
        throw new CommandLine.ParameterException(
                spec.commandLine(),
                "which verb? check, import, calibrate, simulate, pair, normalize, sensitivity, reconstruct, lines or demo");
    }

    /** The version of the program, for results. */
    static String version() {
        return Objects.requireNonNullElse(Raysheaf.class.getPackage().getImplementationVersion(), "(not packaged)");
    }

    /** Reads the version from the jar that this class came in. */
    static final class Version implements CommandLine.IVersionProvider {

        Version() {}

        @Override
        public String[] getVersion() {
            return new String[] {"raysheaf " + version()};
        }
    }
}
