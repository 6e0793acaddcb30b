package countwright.install;

import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaModifier;
import com.tngtech.archunit.lang.ArchCondition;
import com.tngtech.archunit.lang.ConditionEvents;
import com.tngtech.archunit.lang.SimpleConditionEvent;

/** Says which classes may be extended by anybody although they were not made for it. */
final class BeFinalAbstractOrSealed extends ArchCondition<JavaClass> {

    BeFinalAbstractOrSealed() {
        super("be final, abstract or sealed");
    }

    @Override
    public void check(JavaClass type, ConditionEvents events) {
        boolean closed = type.getModifiers().contains(JavaModifier.FINAL)
                || type.getModifiers().contains(JavaModifier.ABSTRACT)
                || type.reflect().isSealed();
        events.add(new SimpleConditionEvent(type, closed, type.getName() + " is open to extension"));
    }
}
