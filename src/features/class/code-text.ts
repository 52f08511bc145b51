/** "K7Q4MD" as it is read out: "K7Q 4MD". */
export const codeText = (code: string): string => `${code.slice(0, 3)} ${code.slice(3)}`;
