// In place of the next-env.d.ts that a build writes: types must check in a clone that was never built.
/// <reference types="next" />
/// <reference types="next/image-types/global" />
