namespace CouplingWatch.Server.Host;

/// <summary>Where everything that is kept lies.</summary>
internal static class DataFolder
{
    /// <summary>The full path of a folder that can be written; throws <see cref="StartException"/> when it cannot.</summary>
    public static string Open(string folder)
    {
        var path = Path.GetFullPath(folder);
        try
        {
            Directory.CreateDirectory(path);
            var probe = Path.Combine(path, $".probe-{Environment.ProcessId}");
            using (File.Create(probe, 1, FileOptions.DeleteOnClose)) { }
            return path;
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or NotSupportedException)
        {
            throw new StartException($"--data {path} cannot be written: {e.Message}", e);
        }
    }
}
