/** The tide along the foot of the page: three waves, the quietest ink the page has. */
export const SignInScene = () => (
  <svg
    viewBox="0 0 1440 220"
    preserveAspectRatio="xMidYMax slice"
    className="pointer-events-none absolute inset-x-0 bottom-0 h-56 w-full text-accent"
    aria-hidden="true"
  >
    <path
      d="M0 96C120 40 250 40 370 88s240 56 380 8 230-64 350-12 220 44 340 4V220H0Z"
      fill="currentColor"
      opacity="0.07"
    />
    <path
      d="M0 138c130-44 240-36 360 2s260 44 400-2 240-40 360 4 210 36 320 0V220H0Z"
      fill="currentColor"
      opacity="0.1"
    />
    <path
      d="M0 184c140-28 250-20 380 4s260 22 390-6 240-20 350 6 200 18 320-2V220H0Z"
      fill="currentColor"
      opacity="0.16"
    />
  </svg>
);
