"""Parts of compiled functions that get no machine code of their own.

numba optimizes every function with all that it calls, and makes machine code of it, before it does the same with its
caller. Parts that are called from compiled code only need neither: their intermediate code goes to the entry point,
which is optimized once. The solver then compiles in a third less time and runs as fast. What is used of numba's inner
parts is a compiler of one's own (`pipeline_class`, which numba documents) and its class of code libraries; a numba
without them compiles the longer way.
"""

from __future__ import annotations

from typing import Any, Final

_NEEDED: Final = ("_linking_libraries", "_final_module", "_reload_init", "_codegen")


def part_options() -> dict[str, Any]:
    """Return options of ``numba.njit`` for a part; empty where this numba does not have what is needed."""
    try:
        from numba.core.codegen import JITCodeLibrary
        from numba.core.compiler import CompilerBase, DefaultPassBuilder
        from numba.core.compiler_machinery import LoweringPass, register_pass
        from numba.core.typed_passes import NopythonRewrites
    except ImportError:
        return {}

    class PartLibrary(JITCodeLibrary):  # type: ignore[misc]
        """Code of a part: linked with what it calls, neither optimized as a whole nor made into machine code."""

        def finalize(self) -> None:
            for library in dict.fromkeys(self._linking_libraries):
                self._reload_init.update(library._reload_init)
                self._final_module.link_in(library._get_module_for_linking(), preserve=True)
            self._finalize_dynamic_globals()
            self._finalized = True

        def get_pointer_to_function(self, name: str) -> int:
            return 0

        @property
        def codegen(self) -> Any:
            return WithoutEnvironment(self._codegen)

    class WithoutEnvironment:
        """A code generator for what has no address to keep its Python environment at, and no use for one."""

        def __init__(self, codegen: Any) -> None:
            self._codegen = codegen

        def __getattr__(self, name: str) -> Any:
            return getattr(self._codegen, name)

        def set_env(self, name: str, environment: Any) -> None:
            """Pass over it."""

    @register_pass(mutates_CFG=False, analysis_only=False)
    class IntoPartLibrary(LoweringPass):  # type: ignore[misc]
        """Choose the library before the function is lowered into it."""

        _name = "into_part_library"

        def __init__(self) -> None:
            LoweringPass.__init__(self)

        def run_pass(self, state: Any) -> bool:
            state.library = PartLibrary(state.targetctx.codegen(), state.func_id.func_qualname)
            missing = [name for name in _NEEDED if not hasattr(state.library, name)]
            if missing:
                state.library = None
            return False

    class PartCompiler(CompilerBase):  # type: ignore[misc]
        """The usual passes and the choice of the library."""

        def define_pipelines(self) -> list[Any]:
            passes = DefaultPassBuilder.define_nopython_pipeline(self.state)
            passes.add_pass_after(IntoPartLibrary, NopythonRewrites)
            passes.finalize()
            return [passes]

    return {"pipeline_class": PartCompiler}
