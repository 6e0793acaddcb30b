package countwright.kernel.desk;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Envelope;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.KernelSockets;
import countwright.kernel.wire.Message;
import countwright.kernel.wire.Route;
import countwright.kernel.wire.WireLimits;
import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.ArrayBlockingQueue;
import java.util.concurrent.BlockingQueue;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * A kernel that speaks the protocol on real sockets but runs no Java: each line of a cell is one order, such as
 * {@code print hello} or {@code fail}. It stands in where the behaviour of the desk is under test.
 */
final class ScriptedKernel {

    private final BlockingQueue<Envelope> requests = new ArrayBlockingQueue<>(100);
    private final KernelSockets sockets;
    private int executionCount;

    private ScriptedKernel(ConnectionFile connection) {
        this.sockets = KernelSockets.bind(connection, WireLimits.STANDARD);
        sockets.start((channel, envelope) -> take(envelope));
    }

    static KernelCommand command() {
        return KernelCommand.of(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xshare:auto",
                "-XX:TieredStopAtLevel=1",
                "-cp",
                System.getProperty("java.class.path"),
                ScriptedKernel.class.getName(),
                KernelCommand.CONNECTION_FILE));
    }

    public static void main(String[] arguments) throws Exception {
        new ScriptedKernel(ConnectionFile.read(Path.of(arguments[0]))).serve();
    }

    private void take(Envelope envelope) {
        if (envelope.message().type().equals("shutdown_request")) {
            Runtime.getRuntime().halt(0);
        }
        requests.add(envelope);
    }

    private void serve() throws InterruptedException {
        while (true) {
            Envelope request = requests.take();
            publish(request, "status", object().put("execution_state", "busy"));
            ObjectNode reply = request.message().type().equals("execute_request") ? execute(request) : info();
            String type = request.message().type().replace("_request", "_reply");
            sockets.send(Channel.SHELL, new Envelope(request.route(), caused(request, type, reply)));
            publish(request, "status", object().put("execution_state", "idle"));
        }
    }

    private static ObjectNode info() {
        ObjectNode info = object().put("status", "ok").put("implementation_version", "9.8.7");
        info.putObject("language_info").put("name", "java").put("version", "17.0.1");
        return info;
    }

    private ObjectNode execute(Envelope request) {
        executionCount++;
        ObjectNode reply = object().put("status", "ok").put("execution_count", executionCount);
        publish(request, "execute_input", object().put("execution_count", executionCount));
        for (String line :
                request.message().content().path("code").stringValue("").split("\n")) {
            String[] order = line.split(" ", 2);
            switch (order[0]) {
                case "print" ->
                    publish(request, "stream", object().put("name", "stdout").put("text", order[1] + "\n"));
                case "value" -> {
                    ObjectNode result = bundle(order[1]);
                    publish(request, "execute_result", result.put("execution_count", executionCount));
                }
                case "show" -> publish(request, "display_data", identified(bundle(order[1])));
                case "renew" -> publish(request, "update_display_data", identified(bundle(order[1])));
                case "clear" -> publish(request, "clear_output", object().put("wait", order[1].equals("wait")));
                case "folder" ->
                    publish(
                            request,
                            "stream",
                            object().put("name", "stdout")
                                    .put("text", Path.of("").toAbsolutePath().getFileName() + "\n"));
                case "fail" -> {
                    ObjectNode error = object().put("ename", "Broken").put("evalue", "on order");
                    error.putArray("traceback")
                            .add("\u001B[31mBroken\u001B[0m: on order")
                            .add("  at line 1");
                    publish(request, "error", error);
                    return reply.put("status", "error");
                }
                case "die" -> {
                    System.err.println("the scripted kernel dies on order");
                    Runtime.getRuntime().halt(7);
                }
                default -> {
                    // A comment.
                }
            }
        }
        return reply;
    }

    private void publish(Envelope request, String type, ObjectNode content) {
        sockets.send(Channel.IOPUB, new Envelope(Route.topic(type), caused(request, type, content)));
    }

    private Message caused(Envelope request, String type, ObjectNode content) {
        return Message.caused(
                Header.create(type, sockets.session(), "kernel"),
                request.message().header(),
                content);
    }

    private static ObjectNode bundle(String text) {
        ObjectNode bundle = object();
        bundle.putObject("data").put("text/plain", text);
        bundle.putObject("metadata");
        return bundle;
    }

    private static ObjectNode identified(ObjectNode bundle) {
        bundle.putObject("transient").put("display_id", "one");
        return bundle;
    }

    private static ObjectNode object() {
        return JsonNodeFactory.instance.objectNode();
    }
}
