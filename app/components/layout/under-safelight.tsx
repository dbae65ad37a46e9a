/** The filter that lays pictures under the safelight: their greys run from the ground to the ink. */
export function UnderSafelight() {
  return (
    <svg className="filters" width="0" height="0" aria-hidden="true" focusable="false">
      <filter id="under-safelight" colorInterpolationFilters="sRGB">
        <feColorMatrix values="0.17 0.572 0.058 0 0.114 0.13 0.438 0.044 0 0.051 0.109 0.367 0.037 0 0.027 0 0 0 1 0" />
      </filter>
    </svg>
  );
}
