/** A system error in words. */
export function reason(error: unknown): string {
  const { code, message } = error as { code?: string; message?: string };
  const words: Readonly<Record<string, string>> = {
    ENOENT: "there is no such file or directory",
    EISDIR: "it is a directory",
    ENOTDIR: "a part of its path is not a directory",
    EACCES: "permission denied",
    EPERM: "not permitted",
    EROFS: "the file system is read-only",
    ENOSPC: "no space is left",
    EDQUOT: "no space is left to this user",
    EFBIG: "the file would be larger than is allowed",
    EEXIST: "a file of that name is in the way",
  };
  return words[code ?? ""] ?? message ?? String(error);
}
