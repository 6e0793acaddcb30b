package countwright.kernel.desk;

import java.time.Duration;
import java.time.Instant;
import java.util.Optional;

/**
 * What a reader needs to know of a run to trust or repeat it. Names no person and no folder.
 *
 * @param productVersion version of this kernel
 * @param javaVersion version of the Java that ran the cells
 * @param started when the run began
 * @param duration how long it took
 * @param stoppedAt number of the cell whose error stopped the run, counted from 1 over the cells that run
 */
public record RunRecord(
        String productVersion, String javaVersion, Instant started, Duration duration, Optional<Integer> stoppedAt) {}
