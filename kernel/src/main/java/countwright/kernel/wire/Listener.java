package countwright.kernel.wire;

import java.io.IOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.StandardProtocolFamily;
import java.net.StandardSocketOptions;
import java.net.UnixDomainSocketAddress;
import java.net.UnknownHostException;
import java.nio.channels.ServerSocketChannel;
import java.nio.channels.SocketChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.Optional;

/**
 * A socket that listens where a connection file says, for one channel.
 *
 * @param channel the socket
 * @param file the file of a Unix domain socket, to be removed at the end
 */
record Listener(ServerSocketChannel channel, Optional<Path> file) implements AutoCloseable {

    private static final Logger LOG = System.getLogger(Listener.class.getName());
    private static final int BACKLOG = 200;
    private static final int FILE_TYPE = 0170000;
    private static final int SOCKET_FILE = 0140000;
    private static final int STICKY = 01000;
    private static final int WRITABLE_BY_OTHERS = 0022;

    /** Opens the socket, or says in an {@link IOException} why not. */
    static Listener open(ConnectionFile connection, Channel channel) throws IOException {
        return connection.transport() == Transport.IPC
                ? unix(connection.socketFile(channel))
                : tcp(connection, channel);
    }

    private static Listener tcp(ConnectionFile connection, Channel channel) throws IOException {
        InetSocketAddress address = new InetSocketAddress(host(connection.ip()), connection.port(channel));
        ServerSocketChannel socket = ServerSocketChannel.open();
        try {
            socket.setOption(StandardSocketOptions.SO_REUSEADDR, true);
            socket.bind(address, BACKLOG);
        } catch (IOException | RuntimeException e) {
            socket.close();
            throw new IOException("the port is taken or the address is not of this machine", e);
        }
        if (channel == Channel.SHELL && !address.getAddress().isLoopbackAddress()) {
            LOG.log(
                    Level.WARNING,
                    "The kernel listens on " + connection.ip() + ", which other machines may reach: whoever has the key"
                            + " can run code, and what cells print is sent unencrypted to whoever connects.");
        }
        return new Listener(socket, Optional.empty());
    }

    private static InetAddress host(String ip) throws IOException {
        try {
            return ip.equals("*") ? new InetSocketAddress(0).getAddress() : InetAddress.getByName(ip);
        } catch (UnknownHostException e) {
            throw new IOException("the address is not known", e);
        }
    }

    /**
     * Binds in a folder that only we can enter and moves the socket to its place, so that nobody else can connect before
     * the permissions are set. A socket file left by a kernel that is gone is replaced.
     */
    private static Listener unix(Path file) throws IOException {
        Path folder = Optional.ofNullable(file.toAbsolutePath().getParent()).orElseThrow();
        checkFree(file);
        warnOfOthers(folder);
        Path privateFolder;
        try {
            privateFolder = Files.createTempDirectory(
                    folder, ".cw", PosixFilePermissions.asFileAttribute(PosixFilePermissions.fromString("rwx------")));
        } catch (IOException | UnsupportedOperationException e) {
            throw new IOException("its folder is not there or cannot be written", e);
        }
        Path hidden = privateFolder.resolve("s");
        ServerSocketChannel socket = ServerSocketChannel.open(StandardProtocolFamily.UNIX);
        try {
            socket.bind(UnixDomainSocketAddress.of(hidden), BACKLOG);
            Files.setPosixFilePermissions(hidden, PosixFilePermissions.fromString("rw-------"));
            Files.move(hidden, file, StandardCopyOption.ATOMIC_MOVE);
            return new Listener(socket, Optional.of(file));
        } catch (IOException | RuntimeException e) {
            socket.close();
            throw new IOException(
                    "no socket file can be made there, or its path is too long (" + e.getMessage() + ")", e);
        } finally {
            Files.deleteIfExists(hidden);
            Files.deleteIfExists(privateFolder);
        }
    }

    private static void checkFree(Path file) throws IOException {
        if (!Files.exists(file)) {
            return;
        }
        if ((mode(file) & FILE_TYPE) != SOCKET_FILE) {
            throw new IOException("a file that is no socket is in its place");
        }
        try (SocketChannel probe = SocketChannel.open(StandardProtocolFamily.UNIX)) {
            probe.connect(UnixDomainSocketAddress.of(file));
        } catch (IOException nobodyListens) {
            return;
        }
        throw new IOException("another kernel listens there");
    }

    private static void warnOfOthers(Path folder) {
        try {
            int mode = mode(folder);
            if ((mode & WRITABLE_BY_OTHERS) != 0 && (mode & STICKY) == 0) {
                LOG.log(
                        Level.WARNING,
                        "Others can write to " + folder
                                + " and so put sockets of their own in the place of this kernel's."
                                + " Let the front end use a private folder.");
            }
        } catch (IOException e) {
            LOG.log(Level.DEBUG, "the folder's permissions are not known", e);
        }
    }

    private static int mode(Path file) throws IOException {
        return Files.getAttribute(file, "unix:mode") instanceof Integer mode ? mode : 0;
    }

    /** Closes the socket and removes its file. */
    @Override
    public void close() {
        try {
            channel.close();
            if (file.isPresent()) {
                Files.deleteIfExists(file.get());
            }
        } catch (IOException e) {
            LOG.log(Level.DEBUG, "A socket could not be removed.", e);
        }
    }
}
