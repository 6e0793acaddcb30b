package countwright.worker;

/** A class as the compiler made it. */
public record CompiledClass(String name, Bytes bytecode) {}
