package countwright.install;

import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaMethod;
import com.tngtech.archunit.lang.ArchCondition;
import com.tngtech.archunit.lang.ConditionEvents;
import com.tngtech.archunit.lang.SimpleConditionEvent;
import java.util.List;
import java.util.stream.Stream;

/** Says which methods take or return a type of a library that should stay behind our own. */
final class UseInSignature extends ArchCondition<JavaMethod> {

    private final List<String> libraries;

    UseInSignature(String... libraries) {
        super("take or return types of " + String.join(", ", libraries));
        this.libraries = List.of(libraries);
    }

    @Override
    public void check(JavaMethod method, ConditionEvents events) {
        Stream.concat(method.getRawParameterTypes().stream(), Stream.of(method.getRawReturnType()))
                .filter(this::isOfALibrary)
                .forEach(type -> events.add(
                        SimpleConditionEvent.satisfied(method, method.getFullName() + " uses " + type.getName())));
    }

    private boolean isOfALibrary(JavaClass type) {
        return libraries.stream().anyMatch(library -> type.getPackageName().startsWith(library));
    }
}
