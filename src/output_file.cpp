#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <chromacore/error.hpp>
#include <chromacore/train_file.hpp>
#include <cstdio>
#include <filesystem>
#include <system_error>

namespace chromacore {
namespace {

// The same in every locale, unlike strerror.
std::string reason(int error) {
  switch (error) {
    case ENOENT:
    case ENOTDIR:
      return "its folder does not exist";
    case EACCES:
    case EPERM:
      return "no permission";
    case EISDIR:
      return "it is a folder";
    case EEXIST:
      return "it exists already";
    case ENOSPC:
    case EDQUOT:
      return "no space left";
    case EFBIG:
      return "it would be too large";
    case EROFS:
      return "the file system is read-only";
    case ENAMETOOLONG:
      return "its name is too long";
    case EPIPE:
      return "nobody reads the pipe";
    default:
      return "error " + std::to_string(error) + " of the system";
  }
}

[[noreturn]] void fail(const std::string& path, int error) {
  throw Error(ErrorCode::file_access, "cannot write the file: " + reason(error), {.file = path});
}

// An open file that closes itself; every call answers with errno, 0 for done.
class OutputFile {
 public:
  OutputFile(const std::string& path, int flags, mode_t mode)
      : handle_(::open(path.c_str(), flags | O_WRONLY | O_CLOEXEC, mode)),
        opened_(handle_ < 0 ? errno : 0) {}
  OutputFile(const OutputFile&) = delete;
  OutputFile& operator=(const OutputFile&) = delete;
  ~OutputFile() {
    if (handle_ >= 0) ::close(handle_);
  }

  [[nodiscard]] int opened() const { return opened_; }

  [[nodiscard]] int write(std::string_view text) const {
    while (!text.empty()) {
      const ssize_t written = ::write(handle_, text.data(), text.size());
      if (written < 0 && errno != EINTR) return errno;
      if (written > 0) text.remove_prefix(static_cast<std::size_t>(written));
    }
    return 0;
  }

  [[nodiscard]] int set_mode(mode_t mode) const { return ::fchmod(handle_, mode) == 0 ? 0 : errno; }
  [[nodiscard]] int sync() const { return ::fsync(handle_) == 0 ? 0 : errno; }

 private:
  int handle_;
  int opened_;
};

struct Target {
  std::string path = {};  // links followed
  bool exists = false;
  bool regular = false;
  mode_t mode = 0;
};

Target look_at(const std::string& path) {
  Target target{.path = path};
  struct stat status {};
  target.exists = ::stat(path.c_str(), &status) == 0;
  if (!target.exists) return target;
  target.regular = S_ISREG(status.st_mode);
  target.mode = status.st_mode & 07777U;
  std::error_code error;
  const std::filesystem::path followed = std::filesystem::canonical(path, error);
  if (target.regular && !error) target.path = followed.string();
  return target;
}

// A pipe, a terminal, /dev/null: nothing that a rename could replace.
void write_directly(const std::string& path, std::string_view text) {
  const OutputFile file(path, 0, 0);
  if (file.opened() != 0) fail(path, file.opened());
  if (const int error = file.write(text)) fail(path, error);
}

int write_new(const std::string& path, std::string_view text, const Target& target) {
  const OutputFile file(path, O_CREAT | O_EXCL, 0666);
  if (file.opened() != 0) return file.opened();
  if (target.exists) {
    if (const int error = file.set_mode(target.mode)) return error;
  }
  if (const int error = file.write(text)) return error;
  return file.sync();
}

}  // namespace

void write_file(const std::string& path, std::string_view text) {
  if (path.empty()) throw Error(ErrorCode::file_access, "cannot write a file without a name");
  const Target target = look_at(path);
  if (target.exists && !target.regular) return write_directly(path, text);
  // Who may not write to the old file may not replace it either.
  if (target.exists && ::access(path.c_str(), W_OK) != 0) fail(path, errno);
  const std::string temporary = target.path + "." + std::to_string(::getpid()) + ".part";
  int error = write_new(temporary, text, target);
  if (error == EEXIST) fail(temporary, error);  // not ours to remove
  if (error == 0 && std::rename(temporary.c_str(), target.path.c_str()) != 0) error = errno;
  if (error == 0) return;
  ::unlink(temporary.c_str());
  fail(path, error);
}

}  // namespace chromacore
