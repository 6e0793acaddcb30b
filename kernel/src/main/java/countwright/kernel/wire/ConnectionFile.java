package countwright.kernel.wire;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileSystems;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.nio.file.attribute.FileAttribute;
import java.nio.file.attribute.PosixFileAttributeView;
import java.nio.file.attribute.PosixFilePermission;
import java.nio.file.attribute.PosixFilePermissions;
import java.security.SecureRandom;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.EnumMap;
import java.util.EnumSet;
import java.util.HexFormat;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import tools.jackson.core.JacksonException;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Where a kernel listens and the key that signs its messages.
 *
 * @param transport TCP or Unix domain sockets
 * @param ip address or host name, IPv6 without brackets; for Unix domain sockets the path that all five have in common
 * @param ports one port, 1 to 65535, for every channel; for Unix domain sockets the number after the path and a hyphen
 * @param key the key; empty for unsigned messages
 * @param kernelName the name of the kernelspec; empty if not given
 */
public record ConnectionFile(
        Transport transport, String ip, Map<Channel, Integer> ports, String key, String kernelName) {

    private static final String SCHEME = "hmac-sha256";
    private static final Logger LOG = System.getLogger(ConnectionFile.class.getName());
    private static final Set<PosixFilePermission> FOR_OTHERS = Set.of(
            PosixFilePermission.GROUP_READ,
            PosixFilePermission.GROUP_WRITE,
            PosixFilePermission.OTHERS_READ,
            PosixFilePermission.OTHERS_WRITE);

    public ConnectionFile {
        ports = Map.copyOf(ports);
        if (ports.size() != Channel.values().length) {
            throw new IllegalArgumentException("a connection needs a port for each of " + EnumSet.allOf(Channel.class)
                    + ", but has them only for " + ports.keySet() + ".");
        }
    }

    /**
     * Returns a connection on this machine only, with ports free at this moment and a fresh random key of 256 bits.
     *
     * @throws UncheckedIOException if no port can be had
     */
    public static ConnectionFile create(String kernelName) {
        byte[] secret = new byte[32];
        new SecureRandom().nextBytes(secret);
        return new ConnectionFile(
                Transport.TCP, "127.0.0.1", freePorts(), HexFormat.of().formatHex(secret), kernelName);
    }

    /**
     * Reads a connection file.
     *
     * @throws IOException if the file cannot be read; the message names the file
     * @throws IllegalArgumentException if it is not a connection file we can use; the message names file and field
     */
    public static ConnectionFile read(Path file) throws IOException {
        String text;
        try {
            text = Files.readString(file);
            if (isOpenToOthers(file)) {
                LOG.log(
                        Level.WARNING,
                        "Other users can read or change the connection file " + file
                                + ", and its key lets them run code"
                                + " in this kernel. Let the front end write it with permissions for its owner only.");
            }
        } catch (NoSuchFileException e) {
            throw new IOException(
                    "There is no connection file " + file + ". Pass the file that the front end wrote.", e);
        } catch (IOException e) {
            throw new IOException("The connection file " + file + " cannot be read: " + e.getMessage(), e);
        }
        return parse(text, file.toString());
    }

    /**
     * Reads the text of a connection file.
     *
     * @param where what to call the text in messages
     * @throws IllegalArgumentException if it is not a connection file we can use
     */
    public static ConnectionFile parse(String text, String where) {
        JsonNode root;
        try {
            root = JsonText.standard().read(text);
        } catch (JacksonException e) {
            // The parser's own text could quote the key.
            throw new IllegalArgumentException("The connection file " + where + " is not JSON (line "
                    + e.getLocation().getLineNr() + ", column "
                    + e.getLocation().getColumnNr()
                    + "). Let the front end write it again.");
        }
        if (!(root instanceof ObjectNode fields)) {
            throw new IllegalArgumentException(
                    "The connection file " + where + " is not a JSON object. Let the front end write it again.");
        }
        Transport transport = transport(text(fields, "transport", where).orElse("tcp"), where);
        String key = text(fields, "key", where).orElse("");
        String scheme = text(fields, "signature_scheme", where).orElse(SCHEME);
        if (!key.isEmpty() && !scheme.equals(SCHEME)) {
            throw new IllegalArgumentException("The connection file " + where + " asks for signature_scheme '" + scheme
                    + "', but only '" + SCHEME + "' is known. Set it to " + SCHEME + " at the front end.");
        }
        Map<Channel, Integer> ports = new EnumMap<>(Channel.class);
        for (Channel channel : Channel.values()) {
            ports.put(channel, port(fields, channel.portField(), where));
        }
        Optional<String> ip = text(fields, "ip", where);
        if (transport == Transport.IPC && ip.filter(path -> !path.isEmpty()).isEmpty()) {
            throw new IllegalArgumentException("The connection file " + where
                    + " asks for transport 'ipc' but has no path in 'ip'. Let the front end write it again.");
        }
        return new ConnectionFile(
                transport,
                ip.orElse("127.0.0.1"),
                ports,
                key,
                text(fields, "kernel_name", where).orElse(""));
    }

    private static Transport transport(String name, String where) {
        return Arrays.stream(Transport.values())
                .filter(transport -> transport.protocolName().equals(name))
                .findFirst()
                .orElseThrow(
                        () -> new IllegalArgumentException(
                                "The connection file " + where + " asks for transport '" + name
                                        + "', but only 'tcp' and 'ipc' work here. Set the front end's transport to one of them."));
    }

    /**
     * Writes this connection to a new file that only its owner can read, since the key lets anyone run code.
     *
     * @throws IOException if the file exists, cannot be written, or lies where others can read it whatever we do
     */
    public void write(Path file) throws IOException {
        FileAttribute<?>[] attributes =
                FileSystems.getDefault().supportedFileAttributeViews().contains("posix")
                        ? new FileAttribute<?>[] {
                            PosixFilePermissions.asFileAttribute(PosixFilePermissions.fromString("rw-------"))
                        }
                        : new FileAttribute<?>[0];
        try (var channel = Files.newByteChannel(
                file, Set.of(StandardOpenOption.CREATE_NEW, StandardOpenOption.WRITE), attributes)) {
            // Before the key is in it: some file systems give every file the same permissions.
            if (isOpenToOthers(file)) {
                throw new IOException("The connection file " + file + " would be open to other users, and its key lets"
                        + " them run code. Write it into a folder of a file system that knows permissions.");
            }
            ByteBuffer text = ByteBuffer.wrap(toJson().getBytes(StandardCharsets.UTF_8));
            while (text.hasRemaining()) {
                channel.write(text);
            }
        }
    }

    private static boolean isOpenToOthers(Path file) throws IOException {
        PosixFileAttributeView view = Files.getFileAttributeView(file, PosixFileAttributeView.class);
        return view != null && !Collections.disjoint(view.readAttributes().permissions(), FOR_OTHERS);
    }

    /** Returns the text of the file, key included. */
    public String toJson() {
        ObjectNode fields = JsonNodeFactory.instance.objectNode();
        fields.put("transport", transport.protocolName());
        fields.put("ip", ip);
        for (Channel channel : Channel.values()) {
            fields.put(channel.portField(), port(channel));
        }
        fields.put("signature_scheme", SCHEME);
        fields.put("key", key);
        fields.put("kernel_name", kernelName);
        return JsonMapper.shared().writerWithDefaultPrettyPrinter().writeValueAsString(fields);
    }

    /** Returns the port of a channel. */
    public int port(Channel channel) {
        return Optional.ofNullable(ports.get(channel)).orElseThrow();
    }

    String address(Channel channel) {
        if (transport == Transport.IPC) {
            return "ipc://" + socketFile(channel);
        }
        return "tcp://" + (isIpv6() ? "[" + ip + "]" : ip) + ":" + port(channel);
    }

    /** Returns the file of a channel's Unix domain socket. */
    Path socketFile(Channel channel) {
        return Path.of(ip + "-" + port(channel));
    }

    boolean isIpv6() {
        return transport == Transport.TCP && ip.indexOf(':') >= 0;
    }

    /** Leaves the key out: this text may end in a log. */
    @Override
    public String toString() {
        return "connection to " + transport.protocolName() + " " + ip + " on ports " + new EnumMap<>(ports)
                + (key.isEmpty() ? ", unsigned" : ", signed");
    }

    private static Optional<String> text(ObjectNode fields, String field, String where) {
        JsonNode value = fields.path(field);
        if (value.isMissingNode() || value.isNull()) {
            return Optional.empty();
        }
        if (!value.isString()) {
            throw new IllegalArgumentException("The connection file " + where + " has no text in '" + field
                    + "'. Let the front end write it again.");
        }
        return Optional.of(value.stringValue());
    }

    private static int port(ObjectNode fields, String field, String where) {
        JsonNode value = fields.path(field);
        if (value.isMissingNode()) {
            throw new IllegalArgumentException(
                    "The connection file " + where + " lacks '" + field + "'. Let the front end write it again.");
        }
        if (!value.isInt() || value.intValue() < 1 || value.intValue() > 65_535) {
            throw new IllegalArgumentException("The connection file " + where + " has '" + field + "' = " + value
                    + ", which is no port from 1 to 65535. Let the front end write it again.");
        }
        return value.intValue();
    }

    /** All five are held open together, so that they differ. */
    private static Map<Channel, Integer> freePorts() {
        Map<Channel, Integer> ports = new EnumMap<>(Channel.class);
        List<ServerSocket> held = new ArrayList<>();
        try {
            for (Channel channel : Channel.values()) {
                ServerSocket socket = new ServerSocket(0, 1, InetAddress.getLoopbackAddress());
                held.add(socket);
                ports.put(channel, socket.getLocalPort());
            }
            for (ServerSocket socket : held) {
                socket.close();
            }
        } catch (IOException e) {
            throw new UncheckedIOException("No free port could be had on this machine: " + e.getMessage(), e);
        }
        return ports;
    }
}
