package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class FrameDecoderTest {

    private static final WireLimits SMALL = new WireLimits(6, 100_000, 200_000, 20);

    private final List<List<byte[]>> messages = new ArrayList<>();
    private final List<byte[]> commands = new ArrayList<>();
    private final List<String> skipped = new ArrayList<>();
    private final FrameDecoder decoder = new FrameDecoder(SMALL, new FrameDecoder.Receiver() {
        @Override
        public void message(List<byte[]> frames) {
            messages.add(frames);
        }

        @Override
        public void command(byte[] body) {
            commands.add(body);
        }

        @Override
        public void skipped(String reason) {
            skipped.add(reason);
        }
    });

    @ParameterizedTest
    @ValueSource(ints = {1, 2, 7, 1000, 1 << 20})
    void message_inPiecesOfAnySize_isPutTogether(int piece) throws Exception {
        List<byte[]> frames = List.of(noise(0), noise(255), noise(256), noise(99_000), noise(1));

        feed(bytes(frames), piece);
        feed(bytes(List.of(new byte[0])), piece);

        assertThat(messages).hasSize(2);
        assertThat(messages.get(0)).containsExactlyElementsOf(frames);
        assertThat(messages.get(1)).containsExactly(new byte[0]);
        assertThat(decoder.held()).isZero();
    }

    @Test
    void header_aloneOfTheLongestFrame_holdsNextToNothing() throws Exception {
        decoder.feed(header(Zmtp.LONG, 100_000));

        assertThat(decoder.held()).isLessThanOrEqualTo(16 << 10);
    }

    @Test
    void command_betweenMessages_isHandedOnApart() throws Exception {
        feed(bytes(List.of(noise(3))), 10);
        feed(Zmtp.command(new byte[] {4, 'P', 'I', 'N', 'G'}), 10);
        feed(bytes(List.of(noise(4))), 10);

        assertThat(messages).hasSize(2);
        assertThat(commands).containsExactly(new byte[] {4, 'P', 'I', 'N', 'G'});
    }

    @Test
    void message_ofTooManyFrames_isSkippedAndTheNextArrives() throws Exception {
        feed(bytes(Collections.nCopies(7, noise(300))), 64);
        feed(bytes(List.of(noise(5))), 64);

        assertThat(skipped).containsExactly("7 frames of 2100 bytes are too many");
        assertThat(messages).hasSize(1);
    }

    @Test
    void message_ofTooManyBytes_isSkippedWithoutBeingHeld() throws Exception {
        byte[] bytes = bytes(List.of(noise(90_000), noise(90_000), noise(90_000), noise(7)));
        decoder.feed(ByteBuffer.wrap(bytes, 0, 250_000));
        assertThat(decoder.held()).isZero();
        decoder.feed(ByteBuffer.wrap(bytes, 250_000, bytes.length - 250_000));

        assertThat(skipped).containsExactly("4 frames of 270007 bytes are too many");
        assertThat(messages).isEmpty();
    }

    @ParameterizedTest
    @ValueSource(longs = {100_001, Integer.MAX_VALUE, Long.MAX_VALUE, -1, Long.MIN_VALUE})
    void frame_tooLong_endsTheConnection(long length) {
        assertThatThrownBy(() -> decoder.feed(header(Zmtp.LONG, length)))
                .isInstanceOf(WireViolation.class)
                .hasMessage("it sent a frame longer than 100000 bytes");
    }

    @ParameterizedTest
    @ValueSource(ints = {8, 0x80, 0xff, Zmtp.COMMAND | Zmtp.MORE})
    void flags_unknown_endTheConnection(int flags) {
        assertThatThrownBy(() -> decoder.feed(header(flags, 1)))
                .isInstanceOf(WireViolation.class)
                .hasMessage("it sent bytes that are no frame");
    }

    @Test
    void noise_ofAnyKind_endsInAViolationOrNothing() {
        Random random = new Random(5);
        for (int i = 0; i < 2000; i++) {
            FrameDecoder fresh = new FrameDecoder(SMALL, new Ignoring());
            byte[] bytes = new byte[random.nextInt(3000)];
            random.nextBytes(bytes);
            try {
                fresh.feed(ByteBuffer.wrap(bytes));
            } catch (WireViolation expected) {
                assertThat(expected).hasMessageStartingWith("it sent");
            }
            assertThat(fresh.held()).isBetween(0L, 40_000L);
        }
    }

    private static final class Ignoring implements FrameDecoder.Receiver {
        @Override
        public void message(List<byte[]> frames) {
            assertThat(frames).isNotEmpty();
        }

        @Override
        public void command(byte[] body) {
            assertThat(body.length).isLessThanOrEqualTo(4096);
        }

        @Override
        public void skipped(String reason) {
            assertThat(reason).endsWith("are too many");
        }
    }

    private void feed(byte[] bytes, int piece) throws WireViolation {
        for (int start = 0; start < bytes.length; start += piece) {
            decoder.feed(ByteBuffer.wrap(bytes, start, Math.min(piece, bytes.length - start)));
        }
    }

    private static ByteBuffer header(int flags, long length) {
        ByteBuffer header = ByteBuffer.allocate(9).put((byte) flags);
        if ((flags & Zmtp.LONG) == 0) {
            header.put((byte) length);
        } else {
            header.putLong(length);
        }
        return header.flip();
    }

    private static byte[] bytes(List<byte[]> frames) {
        List<byte[]> pieces = Zmtp.message(frames);
        ByteBuffer all = ByteBuffer.allocate(
                pieces.stream().mapToInt(piece -> piece.length).sum());
        pieces.forEach(all::put);
        return all.array();
    }

    private static byte[] noise(int length) {
        byte[] noise = new byte[length];
        new Random(length).nextBytes(noise);
        return noise;
    }
}
