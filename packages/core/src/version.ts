/** Version of the program; a test keeps it equal to the packages'. */
export const VERSION = '0.1.0';
