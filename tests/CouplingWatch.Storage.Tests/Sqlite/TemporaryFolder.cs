namespace CouplingWatch.Storage.Tests.Sqlite;

/// <summary>A folder of its own for one test.</summary>
internal sealed class TemporaryFolder : IDisposable
{
    public string Path { get; } = Directory.CreateTempSubdirectory("couplingwatch-").FullName;

    public void Dispose() => Directory.Delete(Path, recursive: true);
}
