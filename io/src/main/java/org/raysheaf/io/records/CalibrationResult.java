package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;
import org.raysheaf.io.file.AtomicFile;

/**
 * What a calibration found, channel by channel.
 *
 * @param channels the channels, in order of their numbers
 * @param failures channels for which something could not be found, and why
 * @param timeSpreadPs standard deviation of the time differences about the solution (ps), or null without times
 * @param records records that were looked at
 */
public record CalibrationResult(
        List<Channel> channels,
        List<String> failures,
        @Nullable Double timeSpreadPs,
        long records) {

    /**
     * One channel.
     *
     * @param channel its number
     * @param counts amplitudes seen
     * @param gainKeV energy per unit of amplitude (keV), or null
     * @param gainErrorKeV standard error of it (keV), or null
     * @param fwhmPercent width of the photopeak (per cent of its position), or null
     * @param pairs pairs that told its time
     * @param timeOffsetPs how late it is (ps), to be subtracted; the mean over all channels is 0; or null
     * @param timeOffsetErrorPs standard error of it (ps), about: spread / √pairs; or null
     */
    public record Channel(
            long channel,
            long counts,
            @Nullable Double gainKeV,
            @Nullable Double gainErrorKeV,
            @Nullable Double fwhmPercent,
            long pairs,
            @Nullable Double timeOffsetPs,
            @Nullable Double timeOffsetErrorPs) {}

    /**
     * Writes the table that {@code energy} and {@code table} steps read.
     *
     * @param file the file
     * @param replace whether an existing file may be overwritten
     * @throws IOException if it cannot be written
     */
    public void write(Path file, boolean replace) throws IOException {
        StringBuilder text = new StringBuilder("""
                # Calibration from the data. Energy: amplitude * gain_keV. Time: subtract time_offset_ps.
                # An empty value means that it could not be found; records of such a channel are set aside by the steps that need it.
                """);
        failures.forEach(failure -> text.append("# failed: ").append(failure).append('\n'));
        text.append("channel,gain_keV,gain_error_keV,fwhm_percent,counts,time_offset_ps,time_offset_error_ps,pairs\n");
        for (Channel c : channels) {
            text.append(c.channel())
                    .append(',')
                    .append(number(c.gainKeV(), "%.8g"))
                    .append(',')
                    .append(number(c.gainErrorKeV(), "%.3g"))
                    .append(',')
                    .append(number(c.fwhmPercent(), "%.2f"))
                    .append(',')
                    .append(c.counts())
                    .append(',')
                    .append(number(c.timeOffsetPs(), "%.2f"))
                    .append(',')
                    .append(number(c.timeOffsetErrorPs(), "%.2f"))
                    .append(',')
                    .append(c.pairs())
                    .append('\n');
        }
        AtomicFile.write(
                file, replace, temporary -> Files.writeString(temporary, text.toString(), StandardCharsets.UTF_8));
    }

    private static String number(@Nullable Double value, String format) {
        return value == null ? "" : String.format(Locale.ROOT, format, value);
    }
}
