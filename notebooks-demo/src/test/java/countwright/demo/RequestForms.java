package countwright.demo;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.UUID;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.ObjectNode;

/** Every type of message that a front end sends, well-formed, and each of them with a wrong value in one field. */
final class RequestForms {

    private static final String SECRET = "secret" + "-of-the-fuzz-test";

    /** Type, and content with every field that the protocol gives it. */
    private static final Map<String, String> CONTENTS = new LinkedHashMap<>();

    static {
        CONTENTS.put("kernel_info_request", "{}");
        CONTENTS.put("connect_request", "{}");
        CONTENTS.put(
                "execute_request",
                "{'code':'1','silent':false,'store_history':true,'user_expressions':{'a':'2'},"
                        + "'allow_stdin':false,'stop_on_error':true}");
        CONTENTS.put("complete_request", "{'code':'Strin','cursor_pos':5}");
        CONTENTS.put("inspect_request", "{'code':'String','cursor_pos':3,'detail_level':0}");
        CONTENTS.put("is_complete_request", "{'code':'int x = 1;'}");
        CONTENTS.put(
                "history_request",
                "{'output':false,'raw':true,'hist_access_type':'search','session':0,'start':0,'stop':5,'n':3,"
                        + "'pattern':'*a*','unique':true}");
        CONTENTS.put("comm_info_request", "{'target_name':'t'}");
        CONTENTS.put("comm_open", "{'comm_id':'c','target_name':'t','data':{}}");
        CONTENTS.put("comm_msg", "{'comm_id':'c','data':{'a':1}}");
        CONTENTS.put("comm_close", "{'comm_id':'c','data':{}}");
        CONTENTS.put("interrupt_request", "{}");
        CONTENTS.put("usage_request", "{}");
        CONTENTS.put("debug_request", "{'type':'request','command':'debugInfo','seq':1,'arguments':{}}");
        CONTENTS.put("create_subshell_request", "{}");
        CONTENTS.put("delete_subshell_request", "{'subshell_id':'none'}");
        CONTENTS.put("list_subshell_request", "{}");
        CONTENTS.put("shutdown_request", "{'restart':true}");
        CONTENTS.put("input_reply", "{'value':'v'}");
        CONTENTS.put("execute_reply", "{'status':'ok','execution_count':1}");
        CONTENTS.put("status", "{'execution_state':'idle'}");
    }

    private static final List<String> WRONG_VALUES = List.of(
            "null",
            "true",
            "-1",
            "7",
            "1e300",
            "123456789012345678901234567890",
            "0.5",
            "''",
            "'" + SECRET + "'",
            "'\\u0000\\ud83d'",
            "[]",
            "[[1,{}],null]",
            "{}",
            "{'a':{'b':[]},'':null}");

    /** Four parts of a message. */
    record Form(ObjectNode header, ObjectNode parent, ObjectNode metadata, ObjectNode content) {

        ObjectNode part(int index) {
            return List.of(header, parent, metadata, content).get(index);
        }

        String type() {
            return header.path("msg_type").asString("");
        }
    }

    private RequestForms() {}

    /** A text that some wrong values hold: it must never reach a log. */
    static String secret() {
        return SECRET;
    }

    static List<String> types() {
        return List.copyOf(CONTENTS.keySet());
    }

    /** A well-formed message of a type. */
    static Form valid(String type) {
        ObjectNode header = header(type);
        ObjectNode metadata = json("{'cellId':'c','deletedCells':[],'tags':['t']}");
        return new Form(header, header("input_request"), metadata, json(CONTENTS.getOrDefault(type, "{}")));
    }

    /** Every message with one wrong value; those that would rightly end the kernel left out. */
    static List<Form> wrongInOneField() {
        List<Form> forms = new ArrayList<>();
        for (String type : types()) {
            for (int part = 0; part < 4; part++) {
                for (String field : valid(type).part(part).propertyNames()) {
                    for (String value : WRONG_VALUES) {
                        Form form = valid(type);
                        JsonNode wrong = json("{'v':" + value + "}").path("v");
                        form.part(part).set(field, wrong);
                        if (!endsTheKernel(form)) {
                            forms.add(form);
                        }
                    }
                }
            }
        }
        return forms;
    }

    private static boolean endsTheKernel(Form form) {
        JsonNode restart = form.content().path("restart");
        return form.type().equals("shutdown_request")
                && !form.header().path("msg_id").asString("").isEmpty()
                && form.header().path("msg_id").isString()
                && (restart.isBoolean() || restart.isNull());
    }

    private static ObjectNode header(String type) {
        ObjectNode header = json("{'session':'fuzz','username':'fuzz','date':'2026-01-01T00:00:00Z','version':'5.5',"
                + "'subshell_id':null}");
        return header.put("msg_id", UUID.randomUUID().toString()).put("msg_type", type);
    }

    static ObjectNode json(String text) {
        return (ObjectNode) JsonMapper.shared().readTree(text.replace('\'', '"'));
    }
}
