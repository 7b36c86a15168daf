using System.Text.Json;
using CouplingWatch.Wire;

namespace CouplingWatch.Client.Recordings;

/// <summary><c>NAME.settings.json</c>, which a code without a network reads between its steps: always whole, because it is renamed into place.</summary>
internal static class SettingsFile
{
    public static void Write(string path, SettingsRevision revision)
    {
        var temporary = path + ".new";
        File.WriteAllBytes(temporary, JsonSerializer.SerializeToUtf8Bytes(revision, WireJson.Options));
        File.Move(temporary, path, overwrite: true);
    }
}
